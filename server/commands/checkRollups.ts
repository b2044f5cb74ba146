import { inTransaction } from '../database/inTransaction.js'
import type { Deps } from '../deps.js'
import { Kiln } from '../models/index.js'
import type { Scope } from '../policies/index.js'
import { addToRollups, holdRollups } from '../queries/lossRollups.js'
import { fixedLevels } from '../queries/rollupFirings.js'
import { storedRollups } from '../queries/storedRollups.js'
import type { Rollup, RollupRow } from '../shared/lossRollup.js'
import { rollUpKiln } from './rebuildRollups.js'

/** What a check of one network came to. */
export interface RollupCheck {
  firings: number
  /** Rows whose sums were not those of the lots; they are right now. */
  differences: number
}

/**
 * Counts the roll-ups of losses again from the lots, kiln by kiln, and puts right what differs.
 * Each kiln is one transaction in which revisions wait.
 * @param onKiln called with the number of kilns done and of all; throwing ends the check between two kilns
 */
export async function checkRollups(
  { networkId }: Scope,
  { sequelize }: Pick<Deps, 'sequelize'>,
  onKiln: (done: number, all: number) => Promise<void> = async () => undefined,
): Promise<RollupCheck> {
  const kilns = await Kiln.findAll({
    where: { networkId },
    attributes: ['id'],
    order: ['id'],
    raw: true,
  })
  const check: RollupCheck = { firings: 0, differences: 0 }
  for (const [index, { id }] of kilns.entries()) {
    const { firings, differences } = await inTransaction(sequelize, async (transaction) => {
      await holdRollups(sequelize, networkId, 'alone', transaction)
      const fixed = await fixedLevels(networkId, transaction)
      const { rollup, count } = await rollUpKiln(networkId, id, fixed, transaction)
      const stored = await storedRollups(sequelize, { networkId, kilnId: id }, transaction)
      const moves = differencesOf(rollup, stored)
      await addToRollups(sequelize, networkId, moves, transaction)
      return { firings: count, differences: moves.length }
    })
    check.firings += firings
    check.differences += differences
    await onKiln(index + 1, kilns.length)
  }
  return check
}

/** What must be added to the stored rows to make them the counted ones. */
export function differencesOf(counted: Rollup, stored: readonly RollupRow[]): RollupRow[] {
  const rows = new Map<string, RollupRow>()
  for (const row of counted.values()) rows.set(keyOf(row), { ...row, sums: [...row.sums] })
  for (const row of stored) {
    const target = rows.get(keyOf(row))
    if (target) target.sums = target.sums.map((sum, i) => sum - (row.sums[i] ?? 0))
    else rows.set(keyOf(row), { ...row, sums: row.sums.map((sum) => -sum) })
  }
  return [...rows.values()].filter(({ sums }) => sums.some((sum) => sum !== 0))
}

function keyOf({ kind, month, factor, levelId, fault }: RollupRow): string {
  return [kind, month, factor, levelId, fault].join('|')
}
