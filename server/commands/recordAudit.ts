import type { Transaction } from 'sequelize'
import type { Deps } from '../deps.js'
import { AuditEvent } from '../models/index.js'
import type { Scope } from '../policies/index.js'

export interface AuditedChange {
  /** Noun and verb: `studio.created`, `person.removed`. */
  action: string
  /** The noun alone. */
  subject: string
  subjectUid?: string | null
  /** The studio that it is about; null: the network. */
  studioId?: number | null
  /** What the row said, and what it says now; plain values only. */
  before?: Record<string, unknown> | null
  after?: Record<string, unknown> | null
}

/** Writes down who changed what, in the transaction that changes it. */
export async function recordAudit(
  scope: Pick<Scope, 'networkId' | 'userId' | 'requestId'>,
  { clock }: Pick<Deps, 'clock'>,
  { before = null, after = null, ...change }: AuditedChange,
  transaction: Transaction,
): Promise<void> {
  await AuditEvent.create(
    {
      ...change,
      networkId: scope.networkId,
      actorId: scope.userId,
      requestId: scope.requestId,
      at: clock.now(),
      beforeState: before,
      afterState: after,
    },
    { transaction },
  )
}
