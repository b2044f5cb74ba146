import type { Transaction } from 'sequelize'
import type { RevisionInput } from '../contract/firings.js'
import { Firing, ReportRevision } from '../models/index.js'

export interface RevisionOfHistory {
  uid: string
  number: number
  kind: ReportRevision['kind']
  authorId: number | null
  at: Date
  payload: unknown
}

/** The firing of that uid, locked until the transaction ends; null where there is none. */
export async function lockFiring(
  networkId: number,
  uid: string,
  transaction: Transaction,
): Promise<Firing | null> {
  return Firing.findOne({ where: { networkId, uid }, lock: transaction.LOCK.UPDATE, transaction })
}

/** The revision of that uid anywhere in the network, or null. */
export async function findRevision(
  networkId: number,
  uid: string,
  transaction: Transaction,
): Promise<ReportRevision | null> {
  return ReportRevision.findOne({ where: { networkId, uid }, transaction })
}

/** Revisions of a firing that are a load or a report, oldest first. */
export async function firingHistory(
  networkId: number,
  firingId: number,
  transaction?: Transaction,
) {
  const rows = await ReportRevision.findAll({
    where: { networkId, firingId, kind: ['pack', 'report', 'amend'] },
    order: [['number', 'ASC']],
    transaction,
  })
  return rows.map((row) => ({
    uid: row.uid,
    authorId: row.authorId ?? null,
    at: row.serverTime,
    // Written by saveRevision or writeFirings alone, as the contract parsed it.
    input: row.payload as RevisionInput,
  }))
}
