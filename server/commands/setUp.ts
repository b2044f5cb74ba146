import { inTransaction } from '../database/inTransaction.js'
import type { Deps } from '../deps.js'
import { AppError } from '../errors.js'
import { User } from '../models/index.js'
import { systemScope } from '../queries/scopeFor.js'
import { createNetwork } from './createNetwork.js'
import { makeLink } from './oneTimeLinks.js'
import type { MadeLink } from './oneTimeLinks.js'
import { addPerson } from './savePeople.js'
import { createStudio } from './saveStudio.js'
import { normalEmail } from './signIn.js'

export interface SetUp {
  network: string
  slug: string
  studio: string
  timeZone: string
  name: string
  email: string
  currency: string
}

/**
 * Makes a network, its first studio, and its first person: network admin and owner of the studio.
 * All of it or nothing.
 * @returns a link for the person to set a password; null when their account has one
 * @throws AppError `taken` when the slug is in use
 */
export function setUp(input: SetUp, deps: Deps): Promise<MadeLink | null> {
  const { timeZone, currency } = input
  return inTransaction(deps.sequelize, async (transaction) => {
    const network = await createNetwork(
      { slug: input.slug, name: input.network, timeZone, currency },
      deps,
      transaction,
    )
    const scope = await systemScope(network.id, transaction)
    if (!scope) throw new Error('The new network is not there')
    const { temperatureUnit, lengthUnit, weekStart } = network
    const units = { temperatureUnit, lengthUnit, weekStart }
    const studio = await createStudio(
      scope,
      { name: input.studio, timeZone, currency, appearance: 'name', ...units },
      deps,
      transaction,
    )
    const { link } = await addPerson(
      scope,
      {
        name: input.name,
        email: input.email,
        assignments: [
          { role: 'network-admin', studio: null },
          { role: 'owner', studio: studio.uid },
        ],
      },
      deps,
      transaction,
    )
    return link
  })
}

/**
 * A link for somebody who cannot sign in and whom nobody can give one: whoever runs the machine may.
 * @throws AppError `not-found`
 */
export async function linkForAccount(email: string, deps: Deps): Promise<MadeLink> {
  const user = await User.findOne({ where: { email: normalEmail(email) } })
  if (!user)
    throw new AppError('not-found', `There is no account with the e-mail address ${email}.`)
  const kind = user.passwordHash === null ? 'invite' : 'reset'
  return inTransaction(deps.sequelize, (transaction) =>
    makeLink({ kind, userId: user.id, networkId: null, createdBy: null }, deps, transaction),
  )
}
