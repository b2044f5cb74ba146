import type { FaultRule } from './rules.js'
import { FAULT_RULES, faultRule, overOffered } from './rules.js'

/** What is recorded of a lot that may rule a fault out; null is "not recorded" and rules nothing out. */
export interface RecordedLot {
  /** Code of the forming. */
  forming: string | null
  hasGlaze: boolean | null
  hasJoint: boolean | null
  refireCount: number
}

/** Has the lot glaze? A glaze that is named says yes, "no glaze" of `glaze_sides` says no. */
export function hasGlaze(glazes: number, sidesCode: string | null): boolean | null {
  if (sidesCode === 'none') return false
  return glazes > 0 || sidesCode !== null ? true : null
}

/** Has the lot joined parts? A joining practice says yes; nothing that is recorded says no. */
export function hasJoint(joiningPractices: number): boolean | null {
  return joiningPractices > 0 ? true : null
}

/**
 * Could this lot show the fault, as far as is recorded? The kind of firing (`seenIn`) is asked apart.
 * First firings are the denominator of every fault but those that need a refire, which are over
 * refired pieces alone: nothing is counted twice.
 */
export function lotAtRisk(rule: FaultRule, lot: RecordedLot): boolean {
  if (rule.needsRefire !== lot.refireCount > 0) return false
  if (rule.needsGlaze && lot.hasGlaze === false) return false
  if (rule.needsJoint && lot.hasJoint === false) return false
  return lot.forming === null || rule.forming.length === 0 || rule.forming.includes(lot.forming)
}

/** Faults whose rates are over the same pieces of any lot. */
export interface RiskGroup {
  /** Id of the group's first fault. */
  id: string
  rule: FaultRule
  overOffered: boolean
}

function profile(rule: FaultRule): string {
  const { needsGlaze, needsJoint, needsRefire, forming } = rule
  return JSON.stringify([
    overOffered(rule),
    needsGlaze,
    needsJoint,
    needsRefire,
    [...forming].sort(),
  ])
}

const byProfile = new Map<string, RiskGroup>()
for (const rule of FAULT_RULES) {
  const key = profile(rule)
  if (!byProfile.has(key)) byProfile.set(key, { id: rule.id, rule, overOffered: overOffered(rule) })
}

/** Every group, in the order of the rules. */
export const RISK_GROUPS: readonly RiskGroup[] = [...byProfile.values()]

const byFault = new Map(FAULT_RULES.map((rule) => [rule.id, byProfile.get(profile(rule))]))

/** The group of a fault; undefined for an unknown id. */
export function riskGroup(faultId: string): RiskGroup | undefined {
  return faultRule(faultId) && byFault.get(faultId)
}
