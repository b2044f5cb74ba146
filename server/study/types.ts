import type { Factor } from '../shared/factors.js'
import type { FaultRule } from '../shared/faults/index.js'
import type { FiringKind } from '../shared/kinds.js'

/** What the study needs of a factor; entries of shared/factors.ts are factors. */
export type StudyFactor = Pick<Factor, 'id' | 'of' | 'several' | 'applies'>

/** What the study needs of a fault node: its place in the tree and its at-risk rule. */
export interface StudyFault extends Pick<
  FaultRule,
  | 'id'
  | 'seenIn'
  | 'needsGlaze'
  | 'needsJoint'
  | 'needsRefire'
  | 'forming'
  | 'glazeFit'
  | 'seenBeforeFiring'
> {
  parent: string | null
}

/** Pieces of one row that failed alike. */
export interface StudyLoss {
  /** Main fault: a node of the tree. */
  fault: string
  /** Faults that the same pieces have too. */
  also: readonly string[]
  pieces: number
  /** 'turned-away' counts only for faults that can be seen before a firing; every other outcome is of a fired piece. */
  outcome: string
  /** "A neighbour did it": these pieces stay out of comparisons. */
  event: boolean
}

/** One lot, the rest of a firing as a whole, or one described piece of the rest. */
export interface StudyRow {
  firing: string | number
  studio: string
  kiln: string
  kind: FiringKind
  /** Reported as one event that took the whole load: the row is left out. */
  wholeLoadFailed: boolean
  /** Of the rest: the rest as a whole (counts only), or, with `described`, one described piece of it. */
  isRest: boolean
  described?: boolean
  /** How many sound pieces of the rest a spot-checked one stands for (sound in the rest / checked); 1 when left out. */
  standsFor?: number
  /** Pieces offered. */
  pieces: number
  turnedAway: number
  notLookedAt: number
  refireCount: number
  /** Levels of lot factors; null, an empty list or a missing key is "not recorded". */
  levels: Readonly<Record<string, string | readonly string[] | null | undefined>>
  /** Levels of firing factors, the same on every row of a firing; `kiln` is taken from the row when missing. */
  firingLevels: Readonly<Record<string, string | null | undefined>>
  /** Codes of shared/factors.ts; null is "not recorded" and counts as at risk. */
  formingCode: string | null
  hasGlaze: boolean | null
  hasJoint: boolean | null
  losses: readonly StudyLoss[]
}

export interface StudyOptions {
  faults: readonly StudyFault[]
  /** One studio alone; the whole network when left out. */
  studio?: string
  /** Of the exact p-values; the same seed and rows give the same numbers. */
  seed?: number
  /** Confidence of the intervals; 0.95. */
  level?: number
  /** Findings are kept up to this q; 0.10. */
  keep?: number
  /** Also return every comparison made, for calibration. */
  everyComparison?: boolean
}

export type ComparisonKind =
  /** Lots of the same firing against each other. */
  | 'within-firings'
  /** Firings of the same studio and kind against each other: weaker for a factor of the lot. */
  | 'between-firings'

export interface Comparison {
  fault: string
  /** Factor id; for a glaze and clay body pair, both. */
  factors: readonly string[]
  /** Level keys in the order of `factors`. */
  levels: readonly string[]
  comparison: ComparisonKind
  /** Of the fault's rate with the level against all other recorded levels; null: nothing lost with the others. */
  ratio: number | null
  lower: number | null
  upper: number | null
  statistic: number | null
  pValue: number
  /** How pValue was found. */
  method: 'normal' | 'dealt' | 'tail'
  direction: 'raised' | 'lowered'
  /** Pieces in the compared firings; spot-checked pieces stand for those they were picked from. */
  exposedUnits: number
  exposedEvents: number
  unexposedUnits: number
  unexposedEvents: number
  /** Firings (within) or studio × kind groups (between) that hold both sides. */
  mixedStrata: number
  /** Firings that could tell the sides apart. */
  informativeFirings: number
}

/** One level of the factor, over all pieces that could show the fault. */
export interface LevelLine {
  level: readonly string[]
  units: number
  events: number
  firings: number
  rate: number | null
  lower: number | null
  upper: number | null
}

export interface Finding extends Comparison {
  qValue: number
  /** Share of the pieces at risk for which the factor is recorded. */
  coverage: number
  table: LevelLine[]
  /** Filled by the later steps of the study. */
  verdict: null
  adjusted: null
  worth: null
  memory: null
}

export interface StudyResult {
  /** Comparisons made: the family of the q-values. */
  comparisons: number
  findings: Finding[]
  firings: number
  /** Rows that were lots. */
  lots: number
  /** Pieces fired and looked at. */
  pieces: number
  /** Losses on lots that could not show the fault, by fault: kept, to be checked, in no comparison. */
  notAtRisk: { fault: string; pieces: number }[]
  every?: Comparison[]
}
