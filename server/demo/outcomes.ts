import type { FailedOutcome } from '../shared/counts.js'
import { FAULT_TREE, faultNode, faultRule, withDescendants } from '../shared/faults/index.js'
import type { FiringKind } from '../shared/kinds.js'
import type { Load, TrueLot } from './loads.js'
import type { Random } from './random.js'
import { BASE_RISKS, WORK_RISKS } from './truth.js'
import type { BaseRisk, PlantedEffect } from './truth.js'

/** Pieces of one lot that failed alike, before anything is written down. */
export interface Failure {
  fault: string
  outcome: FailedOutcome | 'turned-away'
  pieces: number
}

/** The firing around a lot: what its lots share. */
export interface FiringRisks {
  load: Load
  hot: boolean
  /** Months before the end of the demo. */
  monthsAgo: number
  /** This firing's own risk of each fault, drawn once. */
  own: ReadonlyMap<string, number>
}

/** Draws the firing's own risks: a beta around the base rate, so that pieces fail together. */
export function drawRisks(kind: FiringKind, factor: number, random: Random): Map<string, number> {
  const own = new Map<string, number>()
  for (const { fault, kinds, rho } of BASE_RISKS) {
    const mean = (kinds[kind] ?? 0) * factor
    if (mean > 0) own.set(fault, random.beta(mean, rho))
  }
  return own
}

const effectsBelow = new Map<readonly PlantedEffect[], Map<string, PlantedEffect[]>>()

function effectsOn(fault: string, effects: readonly PlantedEffect[]): readonly PlantedEffect[] {
  let byFault = effectsBelow.get(effects)
  if (!byFault) {
    byFault = new Map()
    for (const effect of effects) {
      for (const id of withDescendants(effect.fault))
        byFault.set(id, [...(byFault.get(id) ?? []), effect])
    }
    effectsBelow.set(effects, byFault)
  }
  return byFault.get(fault) ?? []
}

function holds(effect: PlantedEffect, lot: TrueLot, firing: FiringRisks): boolean {
  if (effect.lastMonths !== undefined && firing.monthsAgo > effect.lastMonths) return false
  const { when } = effect
  return Object.keys(when).every((factor) => {
    const level = when[factor] ?? ''
    if (factor === 'kiln') return firing.load.kiln.key === level
    if (factor === 'opening_temperature') return firing.hot
    const held = lot.levels[factor]
    return Array.isArray(held) ? held.includes(level) : held === level
  })
}

function workRatio(fault: string, lot: TrueLot): number {
  const work = WORK_RISKS[fault]
  if (!work) return 1
  const held = lot.levels[work.factor]
  return (typeof held === 'string' ? work.ratios[held] : undefined) ?? work.others
}

/** Can pieces of this lot show the fault at all? */
function atRisk({ fault }: BaseRisk, lot: TrueLot, kind: FiringKind): boolean {
  const rule = faultRule(fault)
  if (!rule?.seenIn.includes(kind)) return false
  if (rule.needsJoint && !lot.hasJoint) return false
  if (rule.needsRefire && lot.refireCount === 0) return false
  if (rule.needsGlaze && kind === 'bisque') return false
  return true
}

/** What became of the pieces of a lot: each is lost to one fault at most. */
export function failures(
  lot: TrueLot,
  firing: FiringRisks,
  effects: readonly PlantedEffect[],
  random: Random,
): Failure[] {
  const { kind } = firing.load
  const risks: [string, number][] = []
  let sum = 0
  for (const base of BASE_RISKS) {
    const own = firing.own.get(base.fault)
    if (own === undefined || !atRisk(base, lot, kind)) continue
    const ratio = effectsOn(base.fault, effects).reduce(
      (all, each) => all * (holds(each, lot, firing) ? each.ratio : 1),
      1,
    )
    const risk = own * ratio * workRatio(base.fault, lot)
    risks.push([base.fault, risk])
    sum += risk
  }
  const scale = sum > 0.9 ? 0.9 / sum : 1
  const found = new Map<string, Failure>()
  for (let piece = 0; piece < lot.pieces; piece += 1) {
    if (!random.chance(sum * scale)) continue
    const failure = described(random.weighted(risks), kind, random)
    const key = `${failure.fault}/${failure.outcome}`
    const same = found.get(key)
    if (same) same.pieces += 1
    else found.set(key, failure)
  }
  return [...found.values()]
}

const OUTCOMES: Readonly<Record<string, readonly (readonly [FailedOutcome, number])[]>> = {
  waster: [
    ['waster', 90],
    ['second', 7],
    ['refire', 3],
  ],
  second: [
    ['second', 78],
    ['waster', 12],
    ['refire', 10],
  ],
  refire: [
    ['refire', 72],
    ['waster', 14],
    ['second', 14],
  ],
}
const PLAIN = new Set(FAULT_TREE.filter((node) => !node.leaf).map((node) => node.id))

/** As it is reported: often the coarser name, and cracks in greenware sometimes seen before the kiln is loaded. */
function described(fault: string, kind: FiringKind, random: Random): Failure {
  const rule = faultRule(fault)
  const parent = faultNode(fault)?.parent
  const named =
    parent && PLAIN.has(parent) && parent !== 'body-fault' && random.chance(0.22) ? parent : fault
  const green = kind === 'bisque' || kind === 'single'
  const seenEarly =
    rule?.seenBeforeFiring === true && (rule.arises === 'drying' || rule.arises === 'making')
  if (green && seenEarly && random.chance(0.14))
    return { fault: named, outcome: 'turned-away', pieces: 1 }
  const usual = OUTCOMES[rule?.usualOutcome ?? 'second'] ?? [['second', 1]]
  // Bisque is not glazed yet: what is wrong with it is mended or thrown away, there are no seconds to sell.
  const outcome = random.weighted(usual)
  return {
    fault: named,
    outcome: kind === 'bisque' && outcome === 'refire' ? 'waster' : outcome,
    pieces: 1,
  }
}
