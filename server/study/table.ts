import type { FiringKind } from '../shared/kinds.js'
import type { Codes } from './levelColumn.js'
import type { StudyFactor } from './types.js'

/** Parts of a firing that a row can be. */
export const LOT = 0
/** The rest of a firing as a whole: its counts, no levels. */
export const REST = 1
/** One described piece of the rest, in a rest that was spot-checked. */
export const REST_PIECE = 2

/** Yes, no and not recorded, as bytes. */
export const UNKNOWN = 0
export const YES = 1
export const NO = 2

/** One factor over all rows (or all firings). */
export interface FactorColumn {
  factor: StudyFactor
  /** Level keys by code unit; level l is levels[l − 1]. */
  levels: readonly string[]
  /** One code a row, 0 = not recorded: the level, or, where `sets` is there, the place of a set of levels. */
  codes: Codes
  /** For a factor of which a lot may hold several: levels of every code. */
  sets: readonly Int32Array[] | null
}

/** Lots of a scope and window, in columns; rows sorted by firing and inside it by what they hold. */
export interface StudyTable {
  rows: number
  /** Pieces offered, and fired; looked at, without pieces that an event took. */
  offered: Int32Array
  fired: Int32Array
  refireCount: Int32Array
  part: Uint8Array
  glaze: Uint8Array
  joint: Uint8Array
  /** Codes of `formings`. */
  forming: Codes
  formings: readonly string[]
  /** How many pieces of the rest a described one stands for, per row; null when there are none. */
  standsFor: Float64Array | null
  factors: readonly FactorColumn[]
  firings: StudyFirings
  losses: StudyLosses
  /** Rows left out because the whole load failed. */
  leftOut: number
}

export interface StudyFirings {
  count: number
  names: readonly string[]
  /** Rows of firing f: start[f] … start[f + 1] − 1. */
  start: Int32Array
  /** Place of the firing's studio in `studios`, from 0. */
  studio: Codes
  studios: readonly string[]
  kind: readonly FiringKind[]
  /** Firings by studio, then kind: group h holds byGroup[groups[h]] … byGroup[groups[h + 1] − 1]. */
  byGroup: Int32Array
  groups: Int32Array
  factors: readonly FactorColumn[]
}

export interface StudyLosses {
  count: number
  row: Int32Array
  pieces: Int32Array
  /** 1 = turned away before the firing. */
  before: Uint8Array
  /** Place of the faults (main and also) in `faultSets`. */
  faults: Codes
  faultSets: readonly (readonly string[])[]
}
