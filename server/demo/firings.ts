import { daysBetween, instantOf } from './calendar.js'
import type { KilnHabits, Scenery } from './kettleRing.js'
import { recordedShare } from './likelihoods.js'
import { LotMaker } from './loads.js'
import type { Load, TrueLot } from './loads.js'
import { drawRisks, failures } from './outcomes.js'
import type { Failure, FiringRisks } from './outcomes.js'
import type { Random } from './random.js'
import { amended, neighbours, reported, wholeLoadLost } from './reports.js'
import type { PlantedEffect } from './truth.js'
import type { DemoFiring, DemoKiln, DemoLot, DemoStudio } from './types.js'

/** Pieces that a litre of kiln holds, by kind; greenware may touch and stack. Made up. */
const PIECES_A_LITRE = { bisque: 0.5, glaze: 0.38, single: 0.36, lustre: 0.3, raku: 0.2 } as const
const HOUR = 60
/** The load that the power cut took: kiln and days before the end. */
const POWER_CUT = { kiln: 'buoy', daysAgo: 74, within: 4 }

export interface Made {
  lot: DemoLot
  failures: Failure[]
}

/** Makes the firings of one network, kiln by kiln in time order. */
export class FiringMaker {
  private readonly lots: LotMaker
  private readonly counters = new Map<string, number>()
  private readonly studios: ReadonlyMap<string, DemoStudio>
  private powerCut = false

  constructor(
    private readonly scenery: Scenery,
    private readonly effects: readonly PlantedEffect[],
    private readonly ends: string,
    private readonly random: Random,
  ) {
    this.lots = new LotMaker(scenery)
    this.studios = new Map(scenery.studios.map((studio) => [studio.key, studio]))
  }

  /** The load that a kiln took on a day; null where it never got into the book. */
  firing(kiln: DemoKiln, day: string): DemoFiring | null {
    const random = this.random.part(`${kiln.key}/${day}`)
    const habits = this.habits(kiln)
    const number = this.count(kiln, habits)
    const zone = this.studios.get(kiln.studio)?.timeZone ?? 'UTC'
    const packedAt = instantOf(day, 15 * HOUR + random.whole(0, 5 * HOUR), zone)
    // Fired and never written down: the kiln's counter shows the gap.
    if (random.chance(0.04) || packedAt >= this.end()) return null
    const load = this.load(kiln, random.weighted(habits.kinds), random)
    const temperature = openingTemperature(random.chance(habits.openedHot), load.kind, random)
    const risks: FiringRisks = {
      load,
      hot: temperature >= 150 && load.kind !== 'raku',
      monthsAgo: daysBetween(day, this.ends) / 30.44,
      own: drawRisks(load.kind, Math.exp(0.12 * random.normal()), random),
    }
    const lots = this.fill(load, risks, packedAt, random)
    const rest = this.rest(load, risks, lots, packedAt, random)
    const all = [...lots, rest]
    const pieces = all.reduce((sum, { lot }) => sum + lot.pieces, 0)
    const about = rest.lot.pieces > 4 && random.chance(0.3)
    if (about) rest.lot.pieces += (5 - (pieces % 5)) % 5
    neighbours(all, load.kind, random)
    const firing: DemoFiring = {
      uid: random.uid(packedAt),
      kiln: kiln.key,
      kind: load.kind,
      programme: random.chance(0.93) ? load.programme : null,
      cone: random.chance(0.85) ? load.cone : null,
      localDate: day,
      kilnNumber: number !== null && random.chance(0.9) ? number : null,
      pieces: all.reduce((sum, { lot }) => sum + lot.pieces, 0),
      about,
      cooling: random.chance(0.45)
        ? random.weighted([
            ['closed', 6],
            ['held', 2],
            ['vents', 2],
          ])
        : null,
      note: random.chance(0.03) ? random.pick(NOTES) : null,
      rest: rest.lot.uid,
      lots: lots.map(({ lot }) => lot),
      turnedAway: all.flatMap(({ lot, failures: found }) =>
        found
          .filter(({ outcome }) => outcome === 'turned-away')
          .map(({ fault, pieces: away }) => ({
            uid: random.uid(packedAt),
            lot: lot.uid,
            fault,
            pieces: away,
          })),
      ),
      pack: {
        revision: random.uid(packedAt),
        by: this.somebody(kiln.studio, random),
        at: iso(packedAt),
      },
      report: null,
      amend: null,
    }
    this.reportOn(firing, all, { packedAt, zone, temperature, day }, random)
    return firing
  }

  private end(): number {
    return Date.parse(`${this.ends}T00:00:00Z`)
  }

  private habits(kiln: DemoKiln): KilnHabits {
    return (
      this.scenery.habits[kiln.key] ?? {
        perWeek: 1,
        kinds: [['glaze', 1]],
        openedHot: 0,
        counter: null,
      }
    )
  }

  private count(kiln: DemoKiln, { counter }: KilnHabits): number | null {
    if (counter === null) return null
    const next = (this.counters.get(kiln.key) ?? counter) + 1
    this.counters.set(kiln.key, next)
    return next
  }

  private load(kiln: DemoKiln, kind: Load['kind'], random: Random): Load {
    const choices = this.scenery.levels.filter(
      ({ factor, attributes }) => factor === 'programme' && attributes.kind === kind,
    )
    const programme = random.weighted(
      choices.map((level) => [level, level.key === 'earthenware' ? 0.3 : 1]),
    )
    return { kiln, kind, programme: programme.key, cone: programme.attributes.cone ?? '6' }
  }

  /** Described lots: about eight in a large load. */
  private fill(load: Load, risks: FiringRisks, packedAt: number, random: Random): Made[] {
    const capacity = load.kiln.litres * PIECES_A_LITRE[load.kind]
    const pieces = Math.max(6, Math.round(capacity * (0.85 + 0.25 * random.next())))
    const described = random.chance(0.12)
      ? pieces
      : Math.round(pieces * (0.55 + 0.35 * random.next()))
    const wanted = Math.min(Math.round(9 + 2 * random.normal()), Math.floor(described / 2))
    const shares = Array.from({ length: Math.max(1, wanted) }, () => 0.25 + random.next())
    const sum = shares.reduce((a, b) => a + b, 0)
    const lots: Made[] = []
    for (const share of shares) {
      const truth = this.lots.lot(load, Math.max(1, Math.round((described * share) / sum)), random)
      lots.push({
        lot: this.written(truth, load, packedAt, random),
        failures: failures(truth, risks, this.effects, random),
      })
    }
    return lots
  }

  /** The pieces that nobody described; their practices are as mixed as everyone else's. */
  private rest(
    load: Load,
    risks: FiringRisks,
    lots: readonly Made[],
    packedAt: number,
    random: Random,
  ): Made {
    const capacity = load.kiln.litres * PIECES_A_LITRE[load.kind]
    const described = lots.reduce((sum, { lot }) => sum + lot.pieces, 0)
    const pieces = random.chance(0.12)
      ? 0
      : Math.max(0, Math.round(capacity * (0.9 + 0.2 * random.next())) - described)
    const found = new Map<string, Failure>()
    for (let left = pieces; left > 0; left -= 6) {
      const truth = this.lots.lot(load, Math.min(6, left), random)
      for (const failure of failures(truth, risks, this.effects, random)) {
        const key = `${failure.fault}/${failure.outcome}`
        const same = found.get(key)
        if (same) same.pieces += failure.pieces
        else found.set(key, failure)
      }
    }
    const lot = {
      uid: random.uid(packedAt),
      pieces,
      levels: {},
      glazeOverlap: null,
      refireCount: 0,
      maker: null,
    }
    return { lot, failures: [...found.values()] }
  }

  /** What of a lot gets written down. */
  private written(truth: TrueLot, load: Load, packedAt: number, random: Random): DemoLot {
    const levels = Object.fromEntries(
      Object.entries(truth.levels).filter(
        ([factor, value]) =>
          value.length > 0 && random.chance(recordedShare(load.kiln.studio, factor)),
      ),
    )
    return {
      uid: random.uid(packedAt),
      pieces: truth.pieces,
      levels,
      glazeOverlap: levels.glaze ? truth.glazeOverlap : null,
      refireCount: truth.refireCount,
      maker: truth.maker,
    }
  }

  private somebody(studio: string, random: Random): string {
    const workers = this.scenery.people.filter(({ roles }) =>
      roles.some((held) => held.studio === studio && held.role === 'technician'),
    )
    const people = workers.length > 0 ? workers : this.scenery.people
    return random.pick(people).email
  }

  /** Adds the report, and the amendment where there is one; a load of the last days may still wait. */
  private reportOn(
    firing: DemoFiring,
    all: readonly Made[],
    at: { packedAt: number; zone: string; temperature: number; day: string },
    random: Random,
  ): void {
    const openedAt = instantOf(at.day, (24 + 8) * HOUR + random.whole(0, 10 * HOUR), at.zone)
    const late = random.chance(0.1) ? random.whole(1, 6) * 24 * HOUR : 0
    const reportedAt = openedAt + (random.whole(5, 150) + late) * 60_000
    const ago = daysBetween(at.day, this.ends)
    const forgotten = ago > 3 && ago < 30 && random.chance(0.03)
    if (reportedAt >= this.end() || forgotten) return
    const kiln = this.scenery.kilns.find(({ key }) => key === firing.kiln)
    const by = this.somebody(kiln?.studio ?? '', random)
    const sending = { revision: random.uid(reportedAt), by, at: iso(reportedAt) }
    const temperature = random.chance(0.7) ? at.temperature : null
    if (this.tripsPower(firing, ago)) {
      firing.report = {
        ...sending,
        ...wholeLoadLost(all, reportedAt, random),
        openedAt: iso(openedAt),
        openingTemperatureC: temperature,
      }
      return
    }
    const report = reported(all, { reportedAt, recent: ago < 12, kind: firing.kind }, random)
    firing.report = {
      ...sending,
      ...report,
      openedAt: random.chance(0.8) ? iso(openedAt) : null,
      openingTemperatureC: temperature,
    }
    const amendedAt = reportedAt + random.whole(1, 60) * HOUR * 60_000
    if (random.chance(0.035) && amendedAt < this.end()) amended(firing, { amendedAt, by }, random)
  }

  private tripsPower(firing: DemoFiring, ago: number): boolean {
    if (this.powerCut || firing.kiln !== POWER_CUT.kiln || firing.kind !== 'glaze') return false
    this.powerCut = ago <= POWER_CUT.daysAgo && ago > POWER_CUT.daysAgo - 30
    return this.powerCut
  }
}

const NOTES = [
  'Top shelf packed tight.',
  'Half a shelf left empty.',
  'Witness cone on every shelf.',
  'Two late mugs squeezed in.',
  'Shelves freshly washed.',
] as const

function openingTemperature(hot: boolean, kind: Load['kind'], random: Random): number {
  if (kind === 'raku') return random.whole(870, 960)
  if (hot) return random.whole(150, 215)
  return Math.max(18, Math.min(148, Math.round(72 + 28 * random.normal())))
}

function iso(at: number): string {
  return new Date(at).toISOString()
}
