import { createTestApp, fill, PATHS, signedIn } from './api.js'
import { makePerson, makeStudio, networkOf } from './factories.js'
import { rowsOf } from './rows.js'

export { PATHS }

/** Bodies of the settings pages' forms. */
export const STUDIO = {
  name: 'Mill Lane',
  timeZone: 'Europe/Lisbon',
  currency: 'EUR',
  temperatureUnit: 'C',
  lengthUnit: 'mm',
  weekStart: 1,
  appearance: 'name',
} as const
export const KILN = {
  name: 'Top loader',
  litres: 180,
  heat: 'electric',
  shelves: 5,
  note: null,
} as const
export const LEVEL = { factor: 'clay_body', isReference: false, attributes: {} } as const

/** A network with one studio, and its admin's and owner's browsers. */
export async function setting() {
  const { app, deps } = await createTestApp()
  const studio = await makeStudio()
  const network = await networkOf(studio)
  const owner = await signedIn(app, await makePerson({ roles: [{ role: 'owner', studio }] }))
  const admin = await signedIn(
    app,
    await makePerson({ network, roles: [{ role: 'network-admin' }] }),
  )
  const at = (path: string, parts: Record<string, string> = {}) =>
    fill(path, { network: network.slug, ...parts })
  return { app, deps, studio, network, owner, admin, at }
}

/** What was written down about the network's changes, in order. */
export const audits = (networkId: number) =>
  rowsOf<{ action: string; subject_uid: string }>(
    'SELECT action, subject_uid FROM audit_events WHERE network_id = :networkId ORDER BY id',
    { networkId },
  )
