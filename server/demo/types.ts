import type { CLASS_LEVELS, CLAY_FAMILIES, HEATS } from '../contract/catalogue.js'
import type { WHOLE_LOAD_CAUSES } from '../contract/firings.js'
import type { Role } from '../contract/roles.js'
import type { FailedOutcome } from '../shared/counts.js'
import type { FiringKind } from '../shared/kinds.js'

/**
 * The demo as plain data, before a database has given anything an id. Studios, kilns and levels are
 * named by keys; a fixed level's key is its code in the factor registry.
 */
export interface DemoContent {
  networks: DemoNetwork[]
}

export interface DemoNetwork {
  slug: string
  name: string
  timeZone: string
  currency: string
  temperatureUnit: 'C' | 'F'
  lengthUnit: 'mm' | 'in'
  weekStart: number
  studios: DemoStudio[]
  kilns: DemoKiln[]
  /** Levels beside the fixed ones of the registry. */
  levels: DemoLevel[]
  people: DemoPerson[]
  firings: DemoFiring[]
}

export interface DemoStudio {
  /** Slug. */
  key: string
  name: string
  timeZone: string
  currency: string
  temperatureUnit: 'C' | 'F'
  lengthUnit: 'mm' | 'in'
  weekStart: number
  appearance: 'name' | 'letter' | 'hidden'
  letter: string
}

export interface DemoKiln {
  key: string
  studio: string
  name: string
  litres: number
  heat: (typeof HEATS)[number]
  shelves: number
  note: string | null
}

export interface DemoLevel {
  key: string
  factor: string
  /** Null: the network's own list. */
  studio: string | null
  name: string
  isReference: boolean
  attributes: {
    family?: (typeof CLAY_FAMILIES)[number]
    cone?: string
    kind?: FiringKind
    classLevel?: (typeof CLASS_LEVELS)[number]
    startsOn?: string
    endsOn?: string
    description?: string
    foodUse?: 'not-tested' | 'tested' | 'not-for-food'
  }
}

/** Someone with roles; a label puts them on the sign-in page. */
export interface DemoPerson {
  email: string
  name: string
  label: string | null
  roles: readonly { role: Role; studio: string | null }[]
}

export interface DemoFiring {
  uid: string
  kiln: string
  kind: FiringKind
  programme: string | null
  cone: string | null
  localDate: string
  kilnNumber: number | null
  pieces: number
  about: boolean
  cooling: string | null
  note: string | null
  rest: string
  lots: DemoLot[]
  turnedAway: { uid: string; lot: string; fault: string; pieces: number }[]
  pack: DemoSending
  report: (DemoSending & DemoReport) | null
  amend: (DemoSending & DemoReport & { reason: string }) | null
}

/** Who sent a revision, and when (ISO, UTC). */
export interface DemoSending {
  revision: string
  by: string
  at: string
}

export interface DemoReport {
  openedAt: string | null
  openingTemperatureC: number | null
  wholeLoadFailed: (typeof WHOLE_LOAD_CAUSES)[number] | null
  lots: DemoLotReport[]
  note: string | null
}

export interface DemoLotReport {
  lot: string
  notLookedAt: number
  losses: DemoLoss[]
}

export interface DemoLoss {
  uid: string
  fault: string
  also: string[]
  outcome: FailedOutcome
  pieces: number
  neighbour: boolean
}

export interface DemoLot {
  uid: string
  pieces: number
  /** Keys of levels by factor; a factor that is missing is not recorded. */
  levels: Record<string, string | string[]>
  glazeOverlap: boolean | null
  refireCount: number
  maker: string | null
}
