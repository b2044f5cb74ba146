import { createHash } from 'node:crypto'
import { addDays, daysBetween, isHoliday } from './calendar.js'
import { FiringMaker } from './firings.js'
import { KETTLE_RING } from './kettleRing.js'
import type { Scenery } from './kettleRing.js'
import { makeRandom } from './random.js'
import type { Random } from './random.js'
import { SALT_PAIR } from './saltPair.js'
import { DEMO_TRUTH } from './truth.js'
import type { PlantedEffect } from './truth.js'
import type { DemoContent, DemoFiring, DemoKiln, DemoNetwork } from './types.js'

export interface DemoInput {
  seed: number
  /** Last day, YYYY-MM-DD: nothing happens at or after its midnight in UTC. */
  ends: string
}

const KETTLE_RING_DAYS = 548
const SALT_PAIR_DAYS = 190

/**
 * The demo's two networks as plain data: the first with four studios, 11 kilns, 18 months and what
 * DEMO_TRUTH planted, the second small and without effects. Pure: the same seed and end give the
 * same content.
 */
export function generateDemo({ seed, ends }: DemoInput): DemoContent {
  const random = makeRandom(seed)
  return {
    networks: [
      network(
        KETTLE_RING,
        DEMO_TRUTH.effects,
        { days: KETTLE_RING_DAYS, ends },
        random.part('kettle-ring'),
      ),
      network(SALT_PAIR, [], { days: SALT_PAIR_DAYS, ends }, random.part('salt-pair')),
    ],
  }
}

/** SHA-256 of the content, in hexadecimal: the same on every machine. */
export function demoHash(content: DemoContent): string {
  return createHash('sha256').update(JSON.stringify(content)).digest('hex')
}

function network(
  { habits, ...scenery }: Scenery,
  effects: readonly PlantedEffect[],
  span: { days: number; ends: string },
  random: Random,
): DemoNetwork {
  const maker = new FiringMaker({ habits, ...scenery }, effects, span.ends, random)
  const firings = scenery.kilns.flatMap((kiln) =>
    loadsOf(kiln, habits[kiln.key]?.perWeek ?? 1, span, random.part(`calendar/${kiln.key}`))
      .map((day) => maker.firing(kiln, day))
      .filter((firing): firing is DemoFiring => firing !== null),
  )
  leaveWork(firings, scenery, span.ends)
  firings.sort((a, b) =>
    a.pack.at < b.pack.at ? -1 : a.pack.at > b.pack.at ? 1 : a.uid < b.uid ? -1 : 1,
  )
  return { ...scenery, firings }
}

/** Loads of the last two days wait for their report, and in every studio its newest one, so that there is work to do. */
function leaveWork(
  firings: readonly DemoFiring[],
  { studios, kilns }: Pick<Scenery, 'studios' | 'kilns'>,
  ends: string,
): void {
  for (const { key } of studios) {
    const own = new Set(kilns.filter(({ studio }) => studio === key).map((kiln) => kiln.key))
    const ofStudio = firings.filter(({ kiln }) => own.has(kiln))
    const newest = ofStudio.reduce<DemoFiring | null>(
      (a, b) => (a && a.pack.at >= b.pack.at ? a : b),
      null,
    )
    for (const firing of ofStudio) {
      if (firing !== newest && daysBetween(firing.localDate, ends) > 2) continue
      firing.report = null
      firing.amend = null
    }
  }
}

/** Days on which a kiln is packed: a kiln needs two days for a load, and nobody fires in the holidays. */
function loadsOf(
  kiln: DemoKiln,
  perWeek: number,
  span: { days: number; ends: string },
  random: Random,
): string[] {
  const days: string[] = []
  let day = addDays(span.ends, -span.days + random.whole(0, 3))
  while (daysBetween(day, span.ends) >= 1) {
    if (!isHoliday(day)) days.push(day)
    const gap = (7 / perWeek) * (0.55 + 0.9 * random.next())
    day = addDays(day, Math.max(2, Math.floor(gap + random.next())))
  }
  return days
}
