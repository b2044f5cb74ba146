import type { Transaction } from 'sequelize'
import type { Deps } from '../deps.js'
import { addToRollups } from '../queries/lossRollups.js'
import { fixedLevels, rollupFirings } from '../queries/rollupFirings.js'
import { Rollup } from '../shared/lossRollup.js'
import { addFiring } from '../shared/rollUpFiring.js'

/**
 * Moves the roll-ups by new − old around a change of one firing, in the change's own transaction.
 * Both sides are read from the rows as a rebuild would read them, so that the two cannot differ.
 *
 * @param firingId null while the firing is not there yet
 * @param change writes the firing and returns its id
 */
export async function moveRollups(
  networkId: number,
  firingId: number | null,
  change: () => Promise<number>,
  deps: Pick<Deps, 'sequelize'>,
  transaction: Transaction,
): Promise<void> {
  const fixed = await fixedLevels(networkId, transaction)
  const rollup = new Rollup()
  const put = async (id: number, sign: 1 | -1): Promise<void> => {
    const [firing] = await rollupFirings(networkId, { firingId: id }, fixed, transaction)
    if (firing) addFiring(rollup, firing, sign)
  }
  if (firingId !== null) await put(firingId, -1)
  await put(await change(), 1)
  await addToRollups(deps.sequelize, networkId, [...rollup.values()], transaction)
}
