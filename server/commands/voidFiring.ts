import { v7 } from 'uuid'
import { inTransaction } from '../database/inTransaction.js'
import type { Deps } from '../deps.js'
import { AppError, invalid, notFound } from '../errors.js'
import { ReportRevision } from '../models/index.js'
import type { Scope } from '../policies/index.js'
import { lockFiring } from '../queries/firingHistory.js'
import { holdRollups } from '../queries/lossRollups.js'
import { moveRollups } from './moveRollups.js'
import { payloadHash } from './payloadHash.js'

/**
 * Takes a firing out of everything that is counted, with a reason; nothing of it is deleted.
 * @throws AppError `stale` with `details.revision`, `invalid` when it is void already, `not-found`
 */
export async function voidFiring(
  scope: Scope,
  input: { firing: string; base: number; reason: string },
  deps: Deps,
): Promise<void> {
  const { networkId } = scope
  const { base, reason } = input
  await inTransaction(deps.sequelize, async (transaction) => {
    await holdRollups(deps.sequelize, networkId, 'shared', transaction)
    const firing = await lockFiring(networkId, input.firing, transaction)
    if (!firing) throw notFound()
    if (firing.status === 'void') throw invalid({ form: 'This firing is void already.' })
    if (base !== firing.revision) {
      throw new AppError(
        'stale',
        'This firing has been changed since you opened it. Look at it again before you void it.',
        {
          details: { revision: firing.revision },
        },
      )
    }
    const now = deps.clock.now()
    const payload = { kind: 'void', base, reason }
    const change = async (): Promise<number> => {
      await firing.update(
        { status: 'void', voidReason: reason, revision: base + 1, updatedAt: now },
        { transaction, silent: true },
      )
      await ReportRevision.create(
        {
          networkId,
          firingId: firing.id,
          uid: v7(),
          number: base + 1,
          kind: 'void',
          baseNumber: base,
          reason,
          authorId: scope.userId,
          serverTime: now,
          payload,
          payloadHash: payloadHash(payload),
        },
        { transaction },
      )
      return firing.id
    }
    await moveRollups(networkId, firing.id, change, deps, transaction)
  })
}
