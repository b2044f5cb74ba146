import { setImmediate as nextTurn } from 'node:timers/promises'
import type { Transaction } from 'sequelize'
import { inTransaction } from '../database/inTransaction.js'
import type { Deps } from '../deps.js'
import { Kiln } from '../models/index.js'
import type { Scope } from '../policies/scope.js'
import { addToRollups, clearRollups, holdRollups } from '../queries/lossRollups.js'
import { fixedLevels, rollupFirings } from '../queries/rollupFirings.js'
import type { FixedLevels } from '../queries/rollupFirings.js'
import { Rollup } from '../shared/lossRollup.js'
import { addFiring } from '../shared/rollUpFiring.js'

/** Firings in one piece of work: some 15 ms of it, so that requests are answered in between. */
const PAGE = 30

/**
 * Makes the roll-ups of losses of a network anew from its reported firings, kiln by kiln, so that it
 * holds one kiln's rows in memory. Revisions sent meanwhile wait until it is done.
 *
 * @param transaction the caller's, where rows that it has just written are to count at once
 * @returns how many firings went in
 */
export async function rebuildRollups(
  scope: Pick<Scope, 'networkId'>,
  deps: Pick<Deps, 'sequelize'>,
  transaction?: Transaction,
): Promise<number> {
  const { sequelize } = deps
  if (!transaction) return inTransaction(sequelize, (own) => rebuildRollups(scope, deps, own))
  const { networkId } = scope
  await holdRollups(sequelize, networkId, 'alone', transaction)
  await clearRollups(sequelize, networkId, transaction)
  const fixed = await fixedLevels(networkId, transaction)
  const kilns = await Kiln.findAll({
    where: { networkId },
    attributes: ['id'],
    raw: true,
    transaction,
  })
  let firings = 0
  for (const { id } of kilns) {
    const { rollup, count } = await rollUpKiln(networkId, id, fixed, transaction)
    await addToRollups(sequelize, networkId, [...rollup.values()], transaction)
    firings += count
  }
  return firings
}

/** The roll-ups of one kiln, counted from its reported firings. */
export async function rollUpKiln(
  networkId: number,
  kilnId: number,
  fixed: FixedLevels,
  transaction: Transaction,
) {
  const rollup = new Rollup()
  const after = (afterId: number) =>
    rollupFirings(networkId, { kilnId, afterId, limit: PAGE }, fixed, transaction)
  let count = 0
  for (let coming = after(0); ;) {
    const page = await coming
    const last = page.at(-1)
    // The database reads the next page while this one is added up.
    if (last) coming = after(last.id)
    for (const firing of page) addFiring(rollup, firing)
    count += page.length
    if (!last) return { rollup, count }
    await nextTurn()
  }
}
