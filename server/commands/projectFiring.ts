import type { CreationAttributes, Transaction } from 'sequelize'
import { Firing, FiringLevel, Loss, Lot, LotLevel } from '../models/index.js'
import { firingLevelRows, firingRow, lossRow, lotLevelRows, lotRow } from './firingRows.js'
import type { FiringState, Keys } from './firingRows.js'

/**
 * Writes what a firing's history comes to: the firing, its lots, levels and losses. Lots are kept by
 * uid, so that what points to a lot (photos, labels) still does after an amendment.
 *
 * @param existing the firing's row, locked; null makes one
 * @throws UniqueConstraintError when a uid belongs to another firing, or the firing is made twice at once
 */
export async function projectFiring(
  networkId: number,
  existing: Firing | null,
  state: FiringState,
  keys: Keys,
  transaction: Transaction,
): Promise<Firing> {
  const row = firingRow(networkId, state, keys)
  // `silent`: the row's own updatedAt is that of the revision, by our clock.
  const firing = existing
    ? await existing.update(row, { transaction, silent: true })
    : await Firing.create(row, { transaction, silent: true })
  const lotIds = await writeLots(networkId, firing.id, state, keys, transaction)
  await writeLosses(networkId, firing.id, state, lotIds, transaction)
  const where = { networkId, lotId: [...lotIds.values()] }
  await LotLevel.destroy({ where, transaction })
  await LotLevel.bulkCreate(
    state.load.lots.flatMap((lot) => lotLevelRows(networkId, lotIds.get(lot.uid) ?? 0, lot, keys)),
    { transaction },
  )
  await FiringLevel.destroy({ where: { networkId, firingId: firing.id }, transaction })
  await FiringLevel.bulkCreate(firingLevelRows(networkId, firing.id, state, keys), { transaction })
  return firing
}

/** Ids of the lots by uid. */
async function writeLots(
  networkId: number,
  firingId: number,
  state: FiringState,
  keys: Keys,
  transaction: Transaction,
): Promise<Map<string, number>> {
  const present = new Map(
    (await Lot.findAll({ where: { networkId, firingId }, transaction })).map((lot) => [
      lot.uid,
      lot,
    ]),
  )
  const wanted = new Set(state.load.lots.map(({ uid }) => uid))
  const gone = [...present.values()].filter(({ uid }) => !wanted.has(uid)).map(({ id }) => id)
  if (gone.length > 0) await Lot.destroy({ where: { networkId, id: gone }, transaction })
  const ids = new Map<string, number>()
  const added: CreationAttributes<Lot>[] = []
  for (const lot of state.load.lots) {
    const row = lotRow(networkId, firingId, lot, state, keys)
    const old = present.get(lot.uid)
    if (!old) added.push({ ...row, createdAt: state.last.at })
    else {
      await old.update({ ...row, createdAt: old.createdAt }, { transaction, silent: true })
      ids.set(lot.uid, old.id)
    }
  }
  for (const { uid, id } of await Lot.bulkCreate(added, { transaction })) ids.set(uid, id)
  return ids
}

/** Losses are written anew; those that were there keep the moment at which they were. */
async function writeLosses(
  networkId: number,
  firingId: number,
  state: FiringState,
  lotIds: ReadonlyMap<string, number>,
  transaction: Transaction,
): Promise<void> {
  const where = { networkId, firingId }
  const before = await Loss.findAll({
    where,
    attributes: ['uid', 'createdAt'],
    raw: true,
    transaction,
  })
  const madeAt = new Map(before.map(({ uid, createdAt }) => [uid, createdAt]))
  if (before.length > 0) await Loss.destroy({ where, transaction })
  const rows = state.load.lots.flatMap((lot) =>
    lot.losses.map((loss) => {
      const row = lossRow(networkId, firingId, lotIds.get(lot.uid) ?? 0, loss, state.last.at)
      return { ...row, createdAt: madeAt.get(loss.uid) ?? state.last.at }
    }),
  )
  await Loss.bulkCreate(rows, { transaction })
}
