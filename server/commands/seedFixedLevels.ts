import type { Transaction } from 'sequelize'
import { v7 } from 'uuid'
import { Level, Network } from '../models/index.js'
import { FACTORS } from '../shared/factors.js'

interface Wanted {
  factor: string
  code: string
  name: string
  position: number
}

const WANTED: readonly Wanted[] = FACTORS.flatMap((factor) =>
  (factor.fixed ?? []).map(({ code, name }, position) => ({
    factor: factor.id,
    code,
    name,
    position,
  })),
)

/**
 * Gives a network the fixed levels of the factor registry that it does not have yet, so that a new
 * entry of the registry needs no migration. Levels are known by their code: one that was renamed
 * stays renamed, and a level of the network that has the name already is given the code.
 */
export async function seedFixedLevels(networkId: number, transaction?: Transaction): Promise<void> {
  const present = await Level.findAll({
    where: { networkId, studioId: null },
    attributes: ['factor', 'code'],
    raw: true,
    transaction,
  })
  const known = new Set(present.map(({ factor, code }) => `${factor}/${code}`))
  const missing = WANTED.filter(({ factor, code }) => !known.has(`${factor}/${code}`))
  const added: Wanted[] = []
  for (const level of missing) {
    const { factor, name, code, position } = level
    const [adopted] = await adopt(
      { networkId, factor, name },
      { code, position },
      present,
      transaction,
    )
    if (adopted === 0) added.push(level)
  }
  await Level.bulkCreate(
    added.map((level) => ({ ...level, networkId, uid: v7(), studioId: null, attributes: {} })),
    // Two servers that start at once add the same levels: the second one's are dropped.
    { transaction, ignoreDuplicates: true },
  )
}

/** Asks only where the network has levels of its own in that factor. */
async function adopt(
  at: { networkId: number; factor: string; name: string },
  values: { code: string; position: number },
  present: readonly { factor: string }[],
  transaction?: Transaction,
): Promise<[number]> {
  if (!present.some(({ factor }) => factor === at.factor)) return [0]
  return Level.update(values, { where: { ...at, studioId: null, code: null }, transaction })
}

/** The same for every network, at the start of a server. */
export async function seedAllNetworks(): Promise<void> {
  const networks = await Network.findAll({ attributes: ['id'], raw: true })
  for (const { id } of networks) await seedFixedLevels(id)
}
