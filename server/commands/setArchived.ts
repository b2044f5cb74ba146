import { inTransaction } from '../database/inTransaction.js'
import type { Deps } from '../deps.js'
import { Level, Studio } from '../models/index.js'
import type { Kiln } from '../models/index.js'
import type { Scope } from '../policies/index.js'
import { recordAudit } from './recordAudit.js'
import { updateRow } from './rows.js'

type Archivable = Studio | Kiln | Level

function nounOf(row: Archivable): string {
  if (row instanceof Studio) return 'studio'
  return row instanceof Level ? 'level' : 'kiln'
}

/**
 * Archives a studio, a kiln or a level, or brings it back: it stays on old firings and is offered no
 * more. Saying it twice changes nothing the second time. An archived practice is no reference.
 */
export async function setArchived<Row extends Archivable>(
  scope: Scope,
  row: Row,
  archived: boolean,
  deps: Pick<Deps, 'sequelize' | 'clock'>,
): Promise<Row> {
  if (archived === (row.archivedAt !== null)) return row
  const subject = nounOf(row)
  return inTransaction(deps.sequelize, async (transaction) => {
    const archivedAt = archived ? deps.clock.now() : null
    const reference = row instanceof Level && archived ? { isReference: false } : {}
    const after = await updateRow<Archivable>(row, { archivedAt, ...reference }, transaction)
    await recordAudit(
      scope,
      deps,
      {
        action: `${subject}.${archived ? 'archived' : 'restored'}`,
        subject,
        subjectUid: row.uid,
        studioId: row instanceof Studio ? row.id : row.studioId,
      },
      transaction,
    )
    return after as Row
  })
}
