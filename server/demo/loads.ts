import type { FiringKind } from '../shared/kinds.js'
import type { Scenery } from './kettleRing.js'
import type { Random } from './random.js'
import type { DemoKiln, DemoLevel } from './types.js'

/** A lot as it truly was: every level known, whatever of it gets written down. */
export interface TrueLot {
  pieces: number
  /** Keys by factor; `glaze` holds several. */
  levels: Record<string, string | string[]>
  hasJoint: boolean
  refireCount: number
  glazeOverlap: boolean | null
  maker: string | null
}

export interface Load {
  kiln: DemoKiln
  kind: FiringKind
  programme: string
  cone: string
}

type Weights<T> = readonly (readonly [T, number])[]

const FORMING: Weights<string> = [
  ['thrown', 52], ['slab', 20], ['coil', 9], ['pinch', 8], ['cast', 5], ['pressed', 4], ['mixed', 2],
]
const FORMS: Readonly<Record<string, Weights<string>>> = {
  thrown: [['mug', 40], ['bowl', 32], ['plate', 8], ['bottle', 10], ['jar', 5], ['jug', 5]],
  slab: [['plate', 25], ['mug', 20], ['tile', 25], ['jar', 10], ['sculpture', 20]],
  coil: [['bottle', 50], ['sculpture', 30], ['jug', 20]],
  pinch: [['bowl', 70], ['sculpture', 30]],
  cast: [['mug', 60], ['bottle', 40]],
  pressed: [['plate', 60], ['bowl', 40]],
  mixed: [['sculpture', 60], ['jug', 40]],
}
/** Share of lots with joined parts: handles, spouts and seams, but feet, lugs and sprigs too. */
const JOINED: Readonly<Record<string, number>> = {
  mug: 0.97, jug: 0.97, jar: 0.8, sculpture: 0.9, bottle: 0.4, bowl: 0.35, plate: 0.25, tile: 0.1,
}
const BUILT = new Set(['slab', 'coil'])

/** How common each level is; what is not named has a weight of 10, and a studio's own is as common as three. */
const COMMON: Readonly<Record<string, number>> = {
  buff: 34, white: 26, grogged: 14, porcelain: 16, 'beach-speckle': 14, 'yard-blend': 16, 'harbour-dark': 18,
  'clear-gloss': 20, 'satin-white': 16, celadon: 16, chun: 8, shino: 7, 'matt-black': 8,
  'loose-plastic': 46, 'open-shelf': 24, 'damp-cupboard': 14, 'by-the-fan': 16,
  'score-slip-wrap': 48, 'score-slip': 32, 'slip-only': 20,
  'wiped-dipped': 44, 'unwiped-dipped': 20, poured: 18, brushed: 18,
}
const THICKNESS: Weights<string> = [['under-5', 18], ['5-7', 48], ['8-10', 24], ['11-15', 8], ['over-15', 2]]
const SIZES: Weights<string> = [['under-10', 34], ['10-20', 48], ['20-30', 15], ['over-30', 3]]
const DRIED: Weights<string> = [['under-3', 8], ['3-6', 32], ['7-14', 44], ['over-14', 16]]
const CONDITIONS: Weights<string> = [['fresh', 62], ['pugged', 23], ['reclaim', 15]]
const SHELVES: Weights<string> = [['top', 1], ['middle', 1], ['bottom', 1]]
const SIDES: Weights<string> = [['both', 80], ['inside', 14], ['outside', 6]]
const LUSTRES = ['pearl-lustre', 'gold-lustre']

/** Draws lots for one network. */
export class LotMaker {
  private readonly levels: ReadonlyMap<string, readonly DemoLevel[]>
  private readonly known = new Map<string, Weights<DemoLevel>>()

  constructor(scenery: Scenery) {
    const byFactor = new Map<string, DemoLevel[]>()
    for (const level of scenery.levels) byFactor.set(level.factor, [...(byFactor.get(level.factor) ?? []), level])
    this.levels = byFactor
  }

  /** One lot of so many pieces for this load. */
  lot(load: Load, pieces: number, random: Random): TrueLot {
    const forming = random.weighted(FORMING)
    const form = random.weighted(FORMS[forming] ?? [['bowl', 1]])
    const glazed = load.kind !== 'bisque'
    const hasJoint = random.chance(BUILT.has(forming) ? 0.9 : (JOINED[form] ?? 0.5))
    const aClass = random.chance(0.75) ? this.one('class', load, random) : null
    const glazes = glazed ? this.glazes(load, random) : []
    const levels: TrueLot['levels'] = {
      forming,
      form,
      clay_body: this.clay(load, random),
      clay_condition: random.weighted(CONDITIONS),
      drying_practice: this.one('drying_practice', load, random)?.key ?? '',
      thickness_band: random.weighted(THICKNESS),
      size_band: random.weighted(SIZES),
      days_dried: random.weighted(DRIED),
      rack: this.one('rack', load, random)?.key ?? '',
      shelf: random.weighted(SHELVES),
      class_level: aClass?.attributes.classLevel ?? random.pick(['one-to-three', 'more']),
    }
    if (aClass) levels.class = aClass.key
    if (hasJoint) levels.joining_practice = this.one('joining_practice', load, random)?.key ?? ''
    if (glazed) {
      levels.glaze = glazes
      levels.glaze_sides = random.weighted(SIDES)
      levels.glazing_practice = this.one('glazing_practice', load, random)?.key ?? ''
    }
    return {
      pieces,
      levels,
      hasJoint,
      refireCount: load.kind === 'glaze' && random.chance(0.05) ? 1 : 0,
      glazeOverlap: glazes.length > 1 ? random.chance(0.7) : null,
      maker: random.chance(0.35) ? `tag ${random.whole(1, 64)}` : null,
    }
  }

  private choices(factor: string, load: Load): Weights<DemoLevel> {
    const key = `${factor}/${load.kiln.studio}`
    const choices =
      this.known.get(key) ??
      (this.levels.get(factor) ?? [])
        .filter(({ studio }) => studio === null || studio === load.kiln.studio)
        .map((level) => [level, COMMON[level.key] ?? 10] as const)
    this.known.set(key, choices)
    return choices
  }

  private one(factor: string, load: Load, random: Random): DemoLevel | null {
    const choices = this.choices(factor, load)
    return choices.length === 0 ? null : random.weighted(choices)
  }

  /** Clays that stand the load: earthenware by itself, raku body for raku. */
  private clay(load: Load, random: Random): string {
    const wanted = (family: string | undefined) => {
      if (load.kind === 'raku') return family === 'raku'
      if (load.programme === 'earthenware') return family === 'earthenware'
      if (family === 'earthenware') return load.kind === 'bisque'
      return family !== 'raku' || load.kind === 'bisque'
    }
    const choices = this.choices('clay_body', load).filter(([level]) => wanted(level.attributes.family))
    return random.weighted(choices.map(([level, weight]) => [level.key, level.key === 'raku-body' ? 2 : weight]))
  }

  /** One to three glazes that melt at the load's cone; iron red is a habit of the kiln North. */
  private glazes(load: Load, random: Random): string[] {
    const fits = this.choices('glaze', load).filter(([level]) => {
      if (load.kind === 'lustre') return LUSTRES.includes(level.key)
      return level.attributes.cone === load.cone
    })
    const weighted = fits.map(([level, weight]) => {
      const iron = load.kiln.key === 'north' ? 22 : 0.35
      return [level.key, level.key === 'iron-red' ? iron : weight] as const
    })
    const wanted = random.weighted([[1, 68], [2, 26], [3, 6]])
    const chosen = new Set<string>()
    for (let tries = 0; tries < 8 && chosen.size < wanted; tries += 1) chosen.add(random.weighted(weighted))
    return [...chosen]
  }
}

/**
 * Share of lots for which a studio writes a factor down, as the product of the studio's care and
 * how much trouble the factor is. Made up; "not recorded" is the commonest value of real books.
 */
export function recordedShare(studio: string, factor: string): number {
  return Math.min(0.98, (CARE[studio] ?? 0.8) * (TROUBLE[factor] ?? 0.5))
}

const CARE: Readonly<Record<string, number>> = {
  'otter-stair': 0.96, 'plum-yard': 0.88, 'mooring-loft': 0.8, 'nine-buckets': 0.66,
}
const TROUBLE: Readonly<Record<string, number>> = {
  form: 0.95, clay_body: 1.02, glaze: 1.04, forming: 0.98, drying_practice: 0.88, joining_practice: 0.85,
  glazing_practice: 0.8, class: 0.85, class_level: 0.8, clay_condition: 0.6, rack: 0.62, thickness_band: 0.4,
  size_band: 0.45, days_dried: 0.5, shelf: 0.5, glaze_sides: 0.55,
}
