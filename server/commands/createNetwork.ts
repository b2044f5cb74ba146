import type { Transaction } from 'sequelize'
import { v7 } from 'uuid'
import { inTransaction } from '../database/inTransaction.js'
import { isDuplicate } from '../database/violations.js'
import type { Deps } from '../deps.js'
import { AppError } from '../errors.js'
import { Network } from '../models/index.js'
import { seedFixedLevels } from './seedFixedLevels.js'

export interface NewNetwork {
  slug: string
  name: string
  timeZone: string
  currency?: string
  temperatureUnit?: 'C' | 'F'
  lengthUnit?: 'mm' | 'in'
  /** 0 is Sunday. */
  weekStart?: number
  demo?: boolean
}

/**
 * Makes a network with the fixed levels of the factor registry; no studio and no person yet.
 * @throws AppError `taken` when the slug is in use
 */
export async function createNetwork(
  input: NewNetwork,
  deps: Pick<Deps, 'sequelize'>,
  transaction?: Transaction,
): Promise<Network> {
  if (!transaction) {
    return inTransaction(deps.sequelize, (own) => createNetwork(input, deps, own))
  }
  try {
    const network = await Network.create({ currency: 'EUR', ...input, uid: v7() }, { transaction })
    await seedFixedLevels(network.id, transaction)
    // With what the database put in where the input said nothing.
    return await network.reload({ transaction })
  } catch (error) {
    if (!isDuplicate(error)) throw error
    const fields = { slug: 'Another network has this short name.' }
    throw new AppError('taken', 'Another network has this short name.', { fields })
  }
}
