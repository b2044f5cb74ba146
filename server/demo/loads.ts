import type { FiringKind } from '../shared/kinds.js'
import type { Scenery } from './kettleRing.js'
import {
  FORMING,
  FORMS,
  JOINED,
  BUILT,
  COMMON,
  THICKNESS,
  SIZES,
  DRIED,
  CONDITIONS,
  SHELVES,
  SIDES,
  LUSTRES,
} from './likelihoods.js'
import type { Weights } from './likelihoods.js'
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

/** Draws lots for one network. */
export class LotMaker {
  private readonly levels: ReadonlyMap<string, readonly DemoLevel[]>
  private readonly known = new Map<string, Weights<DemoLevel>>()

  constructor(scenery: Scenery) {
    const byFactor = new Map<string, DemoLevel[]>()
    for (const level of scenery.levels)
      byFactor.set(level.factor, [...(byFactor.get(level.factor) ?? []), level])
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
    const choices = this.choices('clay_body', load).filter(([level]) =>
      wanted(level.attributes.family),
    )
    return random.weighted(
      choices.map(([level, weight]) => [level.key, level.key === 'raku-body' ? 2 : weight]),
    )
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
    const wanted = random.weighted([
      [1, 68],
      [2, 26],
      [3, 6],
    ])
    const chosen = new Set<string>()
    for (let tries = 0; tries < 8 && chosen.size < wanted; tries += 1)
      chosen.add(random.weighted(weighted))
    return [...chosen]
  }
}
