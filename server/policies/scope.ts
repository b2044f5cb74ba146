import type { Role } from '../contract/roles.js'

/** A role that the person holds; studio null: in the whole network. */
export interface HeldRole {
  role: Role
  studioId: number | null
}

export interface NetworkRow {
  id: number
  uid: string
  slug: string
  name: string
  timeZone: string
  currency: string
  temperatureUnit: 'C' | 'F'
  lengthUnit: 'mm' | 'in'
  weekStart: number
}

/**
 * Who asks, in which network: the first argument of every command and query. Made by
 * middleware/tenant.ts from the path and the membership, and by jobs with `systemScope`.
 */
export interface Scope {
  network: NetworkRow
  networkId: number
  /** null: the system itself (jobs, imports from the command line). */
  userId: number | null
  roles: readonly HeldRole[]
  /** Ids of all studios of the network, archived ones too. */
  studioIds: readonly number[]
  requestId: string | null
}
