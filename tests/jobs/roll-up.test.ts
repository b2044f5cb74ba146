import { QueryTypes } from 'sequelize'
import { describe, expect, it } from 'vitest'
import { rollUp } from '../../jobs/roll-up.js'
import { rebuildRollups } from '../../server/commands/rebuildRollups.js'
import type { JobContext } from '../../server/scheduling/types.js'
import { testDeps } from '../support/deps.js'
import { makeNetwork, makeScope, makeStudio } from '../support/factories.js'
import { plantFirings } from '../support/plantedFirings.js'

async function rolledUp() {
  const network = await makeNetwork()
  await plantFirings({ studio: await makeStudio({ network }), firings: 4, lastDay: '2026-03-09' })
  const deps = await testDeps()
  await rebuildRollups(await makeScope(network), deps)
  const context: JobContext = {
    networkId: network.id,
    deps,
    signal: new AbortController().signal,
    progress: async () => undefined,
  }
  const totals = () =>
    deps.sequelize.query(
      'SELECT * FROM loss_rollups WHERE network_id = ? ORDER BY kiln_id, kind, factor, fault, month, level_id',
      {
        type: QueryTypes.SELECT,
        replacements: [network.id],
      },
    )
  return { network, deps, context, totals }
}

describe('the check of the totals', () => {
  it('finds totals that follow the lots right', async () => {
    const { context, totals } = await rolledUp()
    const before = await totals()
    expect(await rollUp(context)).toBe('Counted 4 firings again: all totals are right.')
    expect(before.length).toBeGreaterThan(0)
    expect(await totals()).toEqual(before)
  })

  it('puts right a total that was changed, one that is missing and one too many, and says how many', async () => {
    const { network, deps, context, totals } = await rolledUp()
    const before = await totals()
    const change = (sql: string) =>
      deps.sequelize.query(sql, { replacements: { networkId: network.id } })
    await change(
      "UPDATE loss_rollups SET loss = loss + 5 WHERE network_id = :networkId AND factor = '' AND fault = ''",
    )
    await change(
      "DELETE FROM loss_rollups WHERE network_id = :networkId AND factor = '' AND fault = 's-crack'",
    )
    await change(
      `INSERT INTO loss_rollups (network_id, studio_id, kiln_id, kind, month, factor, level_id, fault, loss)
       SELECT network_id, studio_id, kiln_id, kind, month, factor, level_id, 'crazing', 3 FROM loss_rollups
       WHERE network_id = :networkId AND factor = '' AND fault = ''`,
    )
    const months = new Set(before.map((row) => String((row as { month: string }).month))).size
    expect(await rollUp(context)).toBe(
      `Counted 4 firings again: ${3 * months} totals differed and were put right.`,
    )
    const inTheLots = (rows: object[]) =>
      rows.filter((row) => (row as { fault: string }).fault !== 'crazing')
    expect(inTheLots(await totals())).toEqual(before)
    const [left] = await deps.sequelize.query<{ loss: number }>(
      "SELECT SUM(loss) AS loss FROM loss_rollups WHERE network_id = ? AND fault = 'crazing'",
      {
        type: QueryTypes.SELECT,
        replacements: [network.id],
      },
    )
    expect(Number(left?.loss)).toBe(0)
    expect(await rollUp(context)).toBe('Counted 4 firings again: all totals are right.')
  })
})
