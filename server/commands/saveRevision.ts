import type { Transaction } from 'sequelize'
import type { RevisionInput } from '../contract/firings.js'
import { inTransaction } from '../database/inTransaction.js'
import { isDuplicate } from '../database/violations.js'
import type { Deps } from '../deps.js'
import { AppError, forbidden, invalid, notFound } from '../errors.js'
import { ReportRevision } from '../models/index.js'
import type { Firing } from '../models/index.js'
import { can } from '../policies/index.js'
import type { Scope } from '../policies/index.js'
import { findRevision, firingHistory, lockFiring } from '../queries/firingHistory.js'
import { holdRollups } from '../queries/lossRollups.js'
import { revisionRow, stateOf } from './firingRows.js'
import type { WholeRevision } from './firingRows.js'
import { moveRollups } from './moveRollups.js'
import { payloadHash } from './payloadHash.js'
import { projectFiring } from './projectFiring.js'
import { checkRevision } from './revisionChecks.js'

/** A unique key that two senders ran into lets one through; the other one starts again and finds it. */
const MOST_TRIES = 3

export interface SaveRevision {
  /** uid of the firing; one that is not there yet is made by a revision with base 0 and a load. */
  firing: string
  /** uid of the revision: the same again with the same input changes nothing. */
  revision: string
  input: RevisionInput
}

/**
 * Appends a revision to a firing and makes its lots, losses, counts and roll-ups follow, all in one
 * transaction. Safe to repeat and to race: a repeat answers as the first did, two that were written on
 * the same base end with one `stale`.
 *
 * @throws AppError `different-body` (the uid was used for something else), `stale` with
 *   `details.revision`, `invalid` with messages by field path, `forbidden`, `not-found`
 */
export async function saveRevision(scope: Scope, request: SaveRevision, deps: Deps): Promise<void> {
  for (let tries = 1; ; tries += 1) {
    try {
      return await inTransaction(deps.sequelize, (transaction) =>
        append(scope, request, deps, transaction),
      )
    } catch (error) {
      if (!isDuplicate(error) || tries === MOST_TRIES) throw error
    }
  }
}

async function append(
  scope: Scope,
  request: SaveRevision,
  deps: Deps,
  transaction: Transaction,
): Promise<void> {
  const { networkId } = scope
  const { input } = request
  await holdRollups(deps.sequelize, networkId, 'shared', transaction)
  const firing = await lockFiring(networkId, request.firing, transaction)
  // Asked under the lock: of two equal requests at once the second finds the first one's revision.
  if (await isRepeat(networkId, firing, request, transaction)) return
  checkTurn(scope, firing, input)
  const history = firing ? await firingHistory(networkId, firing.id, transaction) : []
  const revision: WholeRevision = {
    uid: request.revision,
    authorId: scope.userId,
    at: deps.clock.now(),
    input,
  }
  const before = history.length > 0 ? stateOf({ uid: request.firing, revisions: history }) : null
  const state = stateOf({ uid: request.firing, revisions: [...history, revision] })
  const { fields, keys } = await checkRevision(
    scope,
    {
      firingId: firing?.id ?? null,
      before: before?.pack ?? null,
      pack: state.pack,
      packSent: input.pack !== undefined,
      report: state.report,
    },
    deps,
    transaction,
  )
  if (Object.keys(fields).length > 0) throw invalid(fields)
  const change = async (): Promise<number> => {
    const { id } = await projectFiring(networkId, firing, state, keys, transaction)
    await ReportRevision.create(revisionRow(networkId, id, revision, input.base + 1), {
      transaction,
    })
    return id
  }
  await moveRollups(networkId, firing?.id ?? null, change, deps, transaction)
}

async function isRepeat(
  networkId: number,
  firing: Firing | null,
  { revision, input }: SaveRevision,
  transaction: Transaction,
): Promise<boolean> {
  const sent = await findRevision(networkId, revision, transaction)
  if (!sent) return false
  if (sent.firingId === firing?.id && sent.payloadHash === payloadHash(input)) return true
  throw new AppError(
    'different-body',
    'This was sent before with something else in it. Send it as a new revision.',
  )
}

/** Is it this revision's turn, and may this person send it? */
function checkTurn(scope: Scope, firing: Firing | null, input: RevisionInput): void {
  const { kind, base } = input
  if (!firing) {
    if (base !== 0) throw notFound()
    if (kind === 'amend') throw invalid({ kind: 'This firing has no report to amend.' })
    if (!input.pack) throw invalid({ pack: 'Say what went in: this firing was never packed.' })
    return
  }
  if (!can(scope, `firings.${kind}`, { studioId: firing.studioId })) throw forbidden()
  if (base !== firing.revision) {
    throw new AppError(
      'stale',
      'This firing has been changed since you opened it. Look at it again, then send your change.',
      {
        details: { revision: firing.revision },
      },
    )
  }
  if (firing.status === 'void') throw invalid({ kind: 'This firing is void.' })
  if (kind === 'amend' && firing.status === 'packed')
    throw invalid({ kind: 'This firing has no report to amend.' })
  if (kind !== 'amend' && firing.status === 'reported') {
    throw invalid({ kind: 'This firing has been reported: amend its report instead, and say why.' })
  }
}
