import fc from 'fast-check'
import { v7 } from 'uuid'
import { describe, expect, it } from 'vitest'
import { fixedClock } from '../../server/clock.js'
import { rebuildRollups } from '../../server/commands/rebuildRollups.js'
import { saveRevision } from '../../server/commands/saveRevision.js'
import { voidFiring } from '../../server/commands/voidFiring.js'
import { revisionInput } from '../../server/contract/firings.js'
import type { PackBody, ReportBody } from '../../server/contract/firings.js'
import type { Kiln, Level } from '../../server/models/index.js'
import type { Scope } from '../../server/policies/index.js'
import { FAILED_OUTCOMES } from '../../server/shared/counts.js'
import { FAULT_TREE } from '../../server/shared/faults/index.js'
import { testDeps } from '../support/deps.js'
import {
  fixedLevel,
  makeKiln,
  makeLevel,
  makeNetwork,
  makeScope,
  makeStudio,
  networkOf,
} from '../support/factories.js'
import { loadBodies, makeFiring } from '../support/firings.js'
import type { LotOver } from '../support/firings.js'
import { rollupsOf } from '../support/rollups.js'

interface Setting {
  scope: Scope
  kilns: [Kiln, Kiln]
  levels: Record<string, Level[]>
}

async function setting(): Promise<Setting> {
  const network = await makeNetwork()
  const studio = await makeStudio({ network })
  const fixed = (factor: string, ...codes: string[]) =>
    Promise.all(codes.map((code) => fixedLevel(network, factor, code)))
  return {
    scope: await makeScope(network),
    kilns: [await makeKiln({ studio }), await makeKiln({ studio })],
    levels: {
      glaze: [
        await makeLevel({ studio, factor: 'glaze' }),
        await makeLevel({ studio, factor: 'glaze' }),
      ],
      clay_body: [await makeLevel({ studio }), await makeLevel({ network })],
      forming: await fixed('forming', 'thrown', 'coil', 'pinch'),
      glaze_sides: await fixed('glaze_sides', 'none', 'both'),
      cooling: await fixed('cooling', 'fan', 'closed'),
    },
  }
}

/** Numbers that a lot is dealt from: any of them gives counts that can be. */
const lotNumbers = fc.record({
  pieces: fc.integer({ min: 1, max: 20 }),
  parts: fc.array(fc.nat(3), { minLength: 5, maxLength: 5 }),
  faults: fc.array(fc.constantFrom(...FAULT_TREE.map(({ id }) => id)), {
    minLength: 5,
    maxLength: 5,
  }),
  levels: fc.array(fc.nat(5), { minLength: 4, maxLength: 4 }),
  refired: fc.boolean(),
})
type Of<A> = A extends fc.Arbitrary<infer T> ? T : never
type LotNumbers = Of<typeof lotNumbers>

const step = fc.record({
  act: fc.constantFrom('pack', 'report', 'amend', 'amend', 'void', 'new'),
  target: fc.nat(3),
  kind: fc.constantFrom('bisque', 'glaze', 'raku'),
  kiln: fc.nat(1),
  month: fc.integer({ min: 1, max: 3 }),
  opening: fc.option(fc.integer({ min: 40, max: 240 })),
  whole: fc.boolean(),
  lots: fc.array(lotNumbers, { maxLength: 3 }),
  rest: lotNumbers,
})
type Step = Of<typeof step>

function lotOf(n: LotNumbers, levels: Setting['levels'] | null): LotOver {
  let left = n.pieces
  const take = (wanted: number): number => {
    const taken = Math.min(wanted, left)
    left -= taken
    return taken
  }
  const [away, unseen, ...failed] = n.parts.map(take)
  const chosen = Object.entries(levels ?? {})
    .slice(0, 4)
    .flatMap(([factor, list], i) => {
      const level = list[n.levels[i] ?? 0]
      return level ? [[factor, factor === 'glaze' && n.refired ? list : level] as const] : []
    })
  return {
    pieces: n.pieces,
    levels: Object.fromEntries(chosen),
    refireCount: levels && n.refired ? 1 : 0,
    turnedAway: away ? [{ pieces: away, fault: n.faults[0] ?? 'other' }] : [],
    notLookedAt: unseen ?? 0,
    losses: failed.flatMap((pieces, i) =>
      pieces > 0
        ? [
            {
              pieces,
              fault: n.faults[i + 1] ?? 'other',
              also: i === 0 ? [n.faults[4] ?? 'other'] : [],
              outcome: FAILED_OUTCOMES[(i + pieces) % 4],
            },
          ]
        : [],
    ),
  }
}

function bodiesOf(s: Step, { kilns, levels }: Setting) {
  const lots = s.lots.map((n) => lotOf(n, levels))
  const { pieces, ...rest } = lotOf(s.rest, null)
  const cooling = levels.cooling?.[s.target % 3]
  return loadBodies({
    kiln: kilns[s.kiln === 0 ? 0 : 1],
    kind: s.kind,
    localDate: `2026-0${s.month}-15`,
    levels: cooling ? { cooling: cooling.uid } : {},
    pieces: pieces + lots.reduce((sum, lot) => sum + lot.pieces, 0),
    lots,
    rest,
    report: { openingTemperatureC: s.opening, wholeLoadFailed: s.whole ? 'power' : null },
  })
}

interface Known {
  uid: string
  number: number
  state: 'packed' | 'reported' | 'void'
}

/** Plays a step on the firings so far; a step that is not possible for its firing is one that is. */
async function play(s: Step, known: Known[], at: Setting): Promise<void> {
  const deps = await testDeps({ clock: fixedClock('2026-04-01T12:00:00Z') })
  const { pack, report } = bodiesOf(s, at)
  const firing =
    s.act === 'new' ? undefined : known.filter(({ state }) => state !== 'void')[s.target]
  const send = async (
    uid: string,
    base: number,
    input: { kind: string; pack?: PackBody; report?: ReportBody },
  ) => {
    const whole = revisionInput.parse({ ...input, base, reason: 'counted again' })
    await saveRevision(at.scope, { firing: uid, revision: v7(), input: whole }, deps)
  }
  if (!firing) {
    const made: Known = { uid: v7(), number: 1, state: s.whole ? 'reported' : 'packed' }
    await send(made.uid, 0, s.whole ? { kind: 'report', pack, report } : { kind: 'pack', pack })
    known.push(made)
    return
  }
  if (s.act === 'void') {
    await voidFiring(at.scope, { firing: firing.uid, base: firing.number, reason: 'twice' }, deps)
    firing.state = 'void'
  } else if (firing.state === 'reported')
    await send(firing.uid, firing.number, { kind: 'amend', pack, report })
  else if (s.act === 'pack') await send(firing.uid, firing.number, { kind: 'pack', pack })
  else {
    await send(firing.uid, firing.number, { kind: 'report', pack, report })
    firing.state = 'reported'
  }
  firing.number += 1
}

describe('roll-ups', () => {
  it('are after any history what a rebuild makes of the lots', async () => {
    await fc.assert(
      fc.asyncProperty(fc.array(step, { minLength: 4, maxLength: 12 }), async (steps) => {
        const at = await setting()
        const known: Known[] = []
        for (const each of steps) await play(each, known, at)
        const moved = await rollupsOf(at.scope.networkId)
        const count = await rebuildRollups(at.scope, await testDeps())
        expect(count).toBe(known.filter(({ state }) => state === 'reported').length)
        expect(moved).toEqual(await rollupsOf(at.scope.networkId))
      }),
      { numRuns: 8, seed: 20260302 },
    )
  }, 120_000)

  it('hold nothing of firings that are packed or void', async () => {
    const { kiln } = await makeFiring({ status: 'packed', pieces: 30 })
    const scope = await makeScope(await networkOf(kiln))
    const { firing } = await makeFiring({ kiln, pieces: 30 })
    expect(await rollupsOf(kiln.networkId)).not.toEqual({})
    await voidFiring(scope, { firing: firing.uid, base: 2, reason: 'twice' }, await testDeps())
    expect(await rollupsOf(kiln.networkId)).toEqual({})
  })

  it('hold firings whose whole load failed: they count in totals', async () => {
    const { kiln } = await makeFiring({
      pieces: 30,
      rest: { losses: [{ pieces: 30 }] },
      report: { wholeLoadFailed: 'power' },
    })
    expect(Object.keys(await rollupsOf(kiln.networkId)).length).toBeGreaterThan(0)
  })

  it('of one network are left alone when another is rebuilt', async () => {
    const [mine, other] = [await makeFiring(), await makeFiring()]
    const before = await rollupsOf(other.kiln.networkId)
    await rebuildRollups({ networkId: mine.kiln.networkId }, await testDeps())
    expect(await rollupsOf(other.kiln.networkId)).toEqual(before)
  })

  it('lose no report that is sent while they are rebuilt', async () => {
    const kiln = await makeKiln()
    const scope = await makeScope(await networkOf(kiln))
    for (let i = 0; i < 5; i += 1) await makeFiring({ kiln, scope })
    const deps = await testDeps()
    await Promise.all([
      rebuildRollups(scope, deps),
      ...Array.from({ length: 4 }, () => makeFiring({ kiln, scope })),
      rebuildRollups(scope, deps),
    ])
    const moved = await rollupsOf(kiln.networkId)
    await rebuildRollups(scope, deps)
    expect(moved).toEqual(await rollupsOf(kiln.networkId))
  })
})
