import { describe, expect, it } from 'vitest'
import { ABILITIES } from '../../server/contract/roles.js'
import type { Ability, Role } from '../../server/contract/roles.js'
import { assignmentsSeen, canAssign, canMakeLink } from '../../server/policies/assignments.js'
import { abilitiesFor, can, studiosWith } from '../../server/policies/index.js'
import type { HeldRole, Scope } from '../../server/policies/index.js'

/** Own studio, another one of the network, and the network itself (its common lists). */
const OWN = 1
const OTHER = 2

function scopeOf(...roles: HeldRole[]): Scope {
  return {
    roles,
    studioIds: [OWN, OTHER],
    networkId: 1,
    userId: 1,
    requestId: null,
  } as unknown as Scope
}

/**
 * Where somebody with one role may do it: nowhere (-), in the studio of the role alone (own), in every
 * studio and for the network itself (all). The first four columns are roles as they are given: in one
 * studio, and the admin's in the network. The last three hold the studio roles in the whole network.
 */
type Cell = '-' | 'own' | 'all'
const COLUMNS = [
  'technician',
  'owner',
  'education-lead',
  'network-admin',
  'technician+',
  'owner+',
  'education-lead+',
] as const
const TABLE: Readonly<Record<Ability, readonly Cell[]>> = {
  //                   technician owner  lead   admin  techn.+ owner+ lead+
  'network.read': ['all', 'all', 'all', 'all', 'all', 'all', 'all'],
  'today.read': ['all', 'all', 'all', 'all', 'all', 'all', 'all'],
  'catalogue.read': ['all', 'all', 'all', 'all', 'all', 'all', 'all'],
  'catalogue.edit': ['-', 'own', '-', 'all', '-', 'all', '-'],
  'studios.read': ['own', 'own', 'own', 'all', 'all', 'all', 'all'],
  'studios.create': ['-', '-', '-', 'all', '-', '-', '-'],
  'studios.edit': ['-', 'own', '-', 'all', '-', 'all', '-'],
  'kilns.read': ['own', 'own', 'own', 'all', 'all', 'all', 'all'],
  'kilns.edit': ['-', 'own', '-', 'all', '-', 'all', '-'],
  'people.read': ['-', 'own', '-', 'all', '-', 'all', '-'],
  'people.edit': ['-', 'own', '-', 'all', '-', 'all', '-'],
  'firings.read': ['own', 'own', 'own', 'all', 'all', 'all', 'all'],
  'firings.pack': ['own', 'own', '-', '-', 'all', 'all', '-'],
  'firings.report': ['own', 'own', '-', '-', 'all', 'all', '-'],
  'firings.amend': ['own', 'own', '-', '-', 'all', 'all', '-'],
  'firings.void': ['-', 'own', '-', '-', '-', 'all', '-'],
  'firings.makers': ['own', 'own', '-', '-', 'all', 'all', '-'],
  'losses.read': ['own', 'own', 'own', 'all', 'all', 'all', 'all'],
  'findings.read': ['own', 'own', 'own', 'all', 'all', 'all', 'all'],
  'jobs.read': ['-', '-', '-', 'all', '-', '-', '-'],
  'jobs.run': ['-', '-', '-', 'all', '-', '-', '-'],
  'audit.read': ['-', '-', '-', 'all', '-', '-', '-'],
}

function heldAs(column: (typeof COLUMNS)[number]): HeldRole {
  const everywhere = column === 'network-admin' || column.endsWith('+')
  return { role: column.replace('+', '') as Role, studioId: everywhere ? null : OWN }
}

/** Somewhere, in the own studio, in another, for the network's common lists. */
const ANSWERS: Readonly<Record<Cell, readonly boolean[]>> = {
  '-': [false, false, false, false],
  own: [true, true, false, false],
  all: [true, true, true, true],
}

function answers(scope: Scope, ability: Ability): boolean[] {
  const targets = [undefined, { studioId: OWN }, { studioId: OTHER }, { studioId: null }]
  return targets.map((target) => can(scope, ability, target))
}

describe('every role and every ability', () => {
  it('are in the table', () => {
    expect(Object.keys(TABLE).sort()).toEqual([...ABILITIES].sort())
  })

  const cells = ABILITIES.flatMap((ability) =>
    COLUMNS.map((column, index) => [ability, column, TABLE[ability][index] ?? '-'] as const),
  )
  it.each(cells)('%s for %s: %s', (ability, column, cell) => {
    expect(answers(scopeOf(heldAs(column)), ability)).toEqual(ANSWERS[cell])
  })

  it.each(ABILITIES)("%s is nobody's who holds no role", (ability) => {
    expect(answers(scopeOf(), ability)).toEqual(ANSWERS['-'])
  })
})

describe('several roles at once', () => {
  const scope = scopeOf({ role: 'technician', studioId: OWN }, { role: 'owner', studioId: OTHER })

  it('add up, each in its place', () => {
    expect(studiosWith(scope, 'firings.pack')).toEqual([OWN, OTHER])
    expect(studiosWith(scope, 'firings.void')).toEqual([OTHER])
    expect(studiosWith(scope, 'jobs.run')).toEqual([])
  })

  it('are told to the client by name', () => {
    expect(abilitiesFor(scope, { studioId: OWN }, ['firings.pack', 'firings.void'])).toEqual({
      'firings.pack': true,
      'firings.void': false,
    })
  })
})

describe('giving roles', () => {
  const ALL_ROLES: HeldRole[] = (
    ['technician', 'owner', 'education-lead', 'network-admin'] as const
  ).flatMap((role) => [OWN, OTHER, null].map((studioId) => ({ role, studioId })))
  const given = (scope: Scope) => ALL_ROLES.filter((each) => canAssign(scope, each))

  it("is an owner's for technicians and owners of their studio", () => {
    expect(given(scopeOf({ role: 'owner', studioId: OWN }))).toEqual([
      { role: 'technician', studioId: OWN },
      { role: 'owner', studioId: OWN },
    ])
  })

  it("is an admin's for every role", () => {
    expect(given(scopeOf({ role: 'network-admin', studioId: null }))).toEqual(ALL_ROLES)
  })

  it.each(['technician', 'education-lead'] as const)("is not a %s's", (role) => {
    expect(given(scopeOf({ role, studioId: OWN }))).toEqual([])
    expect(given(scopeOf({ role, studioId: null }))).toEqual([])
  })

  it('shows an owner the roles in their studios, an admin all', () => {
    expect(assignmentsSeen(scopeOf({ role: 'owner', studioId: OWN }), ALL_ROLES)).toEqual(
      ALL_ROLES.filter(({ studioId }) => studioId === OWN),
    )
    expect(assignmentsSeen(scopeOf({ role: 'network-admin', studioId: null }), ALL_ROLES)).toEqual(
      ALL_ROLES,
    )
  })

  it('makes links only for those all of whose roles could be given, and who are nowhere else', () => {
    const owner = scopeOf({ role: 'owner', studioId: OWN })
    const technician: HeldRole = { role: 'technician', studioId: OWN }
    expect(canMakeLink(owner, { held: [technician], elsewhere: false })).toBe(true)
    expect(canMakeLink(owner, { held: [technician], elsewhere: true })).toBe(false)
    expect(
      canMakeLink(owner, {
        held: [technician, { role: 'technician', studioId: OTHER }],
        elsewhere: false,
      }),
    ).toBe(false)
  })
})
