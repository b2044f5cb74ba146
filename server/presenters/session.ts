import type { z } from 'zod'
import { preferences } from '../contract/session.js'
import type { Session, SessionNetwork, sessionStudio } from '../contract/session.js'
import { abilitiesFor, can } from '../policies/index.js'
import type { Scope } from '../policies/index.js'
import type { DemoAccountRow } from '../queries/demoAccounts.js'
import type { NetworkOfPerson } from '../queries/networksOfPerson.js'
import { DEMO_PASSWORD } from '../shared/demo.js'
import { VERSION } from '../version.js'

type StudioRow = NetworkOfPerson['studios'][number]

interface PersonRow {
  id: number
  uid: string
  name: string
  email: string
  preferences: Record<string, unknown>
}

function presentStudio(studio: StudioRow, scope: Scope): z.input<typeof sessionStudio> {
  return {
    uid: studio.uid,
    slug: studio.slug,
    name: studio.name,
    timeZone: studio.timeZone,
    currency: studio.currency,
    temperatureUnit: studio.temperatureUnit,
    lengthUnit: studio.lengthUnit,
    weekStart: studio.weekStart,
    abilities: abilitiesFor(scope, { studioId: studio.id }),
  }
}

function presentNetwork(
  { network, roles, studios }: NetworkOfPerson,
  userId: number,
): SessionNetwork {
  const studioIds = studios.map(({ id }) => id)
  const scope: Scope = { network, networkId: network.id, userId, roles, studioIds, requestId: null }
  const named = new Map(
    studios.map((studio) => [studio.id, { uid: studio.uid, name: studio.name }]),
  )
  return {
    slug: network.slug,
    name: network.name,
    timeZone: network.timeZone,
    temperatureUnit: network.temperatureUnit,
    lengthUnit: network.lengthUnit,
    weekStart: network.weekStart,
    roles: roles.map(({ role, studioId }) => ({
      role,
      studio: studioId === null ? null : (named.get(studioId) ?? null),
    })),
    abilities: abilitiesFor(scope, undefined),
    studios: studios
      .filter((studio) => studio.archivedAt === null)
      .filter((studio) => can(scope, 'firings.read', { studioId: studio.id }))
      .map((studio) => presentStudio(studio, scope)),
  }
}

/** The session as its person sees it; `person` null: nobody is signed in. */
export function presentSession(
  person: PersonRow | null,
  networks: readonly NetworkOfPerson[],
  demo: readonly DemoAccountRow[],
): Session {
  return {
    user: person && {
      uid: person.uid,
      name: person.name,
      email: person.email,
      // An older row may lack a key that has a default by now.
      preferences: preferences.parse(person.preferences),
    },
    networks: person ? networks.map((each) => presentNetwork(each, person.id)) : [],
    demo: demo.map(({ label, email, network }) => ({
      label,
      email,
      password: DEMO_PASSWORD,
      network,
    })),
    version: VERSION,
  }
}
