import type { Abilities } from '../contract/common.js'
import { ABILITIES } from '../contract/roles.js'
import type { Ability, Role } from '../contract/roles.js'
import type { Scope } from './scope.js'

export type { HeldRole, NetworkRow, Scope } from './scope.js'

/** What an ability is asked about; a studio of null is the network itself (its common lists). */
export interface Target {
  studioId: number | null
}

type Policy = (scope: Scope, target?: Target) => boolean

/** Holds one of the roles for the target: in its studio or in the whole network. Without a target: somewhere. */
function holds(roles: readonly Role[]): Policy {
  return (scope, target) =>
    scope.roles.some(
      (held) =>
        roles.includes(held.role) &&
        (target === undefined || held.studioId === null || held.studioId === target.studioId),
    )
}

/** Holds one of the roles in the whole network. */
function holdsInNetwork(roles: readonly Role[]): Policy {
  return (scope) => scope.roles.some((held) => held.studioId === null && roles.includes(held.role))
}

const member: Policy = (scope) => scope.roles.length > 0
const worksThere = holds(['technician', 'owner'])
const owns = holds(['owner'])
const admin = holdsInNetwork(['network-admin'])
const ownsOrAdmin: Policy = (scope, target) => admin(scope, target) || owns(scope, target)
const readsFirings = holds(['technician', 'owner', 'education-lead', 'network-admin'])

/** One sentence an ability; what is not here is refused. */
const POLICIES: Readonly<Record<Ability, Policy>> = {
  // Every member sees the network's name and the page of what waits.
  'network.read': member,
  'today.read': member,
  'catalogue.read': member,
  // Studio lists belong to the studio's owners; the network's common lists to its admins.
  'catalogue.edit': ownsOrAdmin,
  'studios.read': readsFirings,
  'studios.create': admin,
  'studios.edit': ownsOrAdmin,
  'kilns.read': readsFirings,
  'kilns.edit': ownsOrAdmin,
  // Owners add people to their own studios; admins anywhere.
  'people.read': ownsOrAdmin,
  'people.edit': ownsOrAdmin,
  // Whoever works in a studio, teaches for it or runs the network reads its firings.
  'firings.read': readsFirings,
  'firings.pack': worksThere,
  'firings.report': worksThere,
  'firings.amend': worksThere,
  'firings.void': owns,
  // Makers and private notes stay in the studio.
  'firings.makers': worksThere,
  'losses.read': readsFirings,
  'findings.read': readsFirings,
  'jobs.read': admin,
  'jobs.run': admin,
  'audit.read': admin,
}

/** Runs the network: may give any role. */
export function isNetworkAdmin(scope: Scope): boolean {
  return admin(scope)
}

/** May this person do it, there (target) or anywhere (no target)? No by default. */
export function can(scope: Scope, ability: Ability, target?: Target): boolean {
  return POLICIES[ability](scope, target)
}

/** Ids of the studios in which the person holds the ability. */
export function studiosWith(scope: Scope, ability: Ability): number[] {
  return scope.studioIds.filter((studioId) => can(scope, ability, { studioId }))
}

/** The abilities named, for one thing: what presenters send along. */
export function abilitiesFor(
  scope: Scope,
  target: Target | undefined,
  names: readonly Ability[] = ABILITIES,
): Abilities {
  return Object.fromEntries(names.map((name) => [name, can(scope, name, target)]))
}
