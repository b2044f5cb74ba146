import { v7 } from 'uuid'
import type { z } from 'zod'
import type { kilnInput } from '../contract/catalogue.js'
import { inTransaction } from '../database/inTransaction.js'
import type { Deps } from '../deps.js'
import { invalid } from '../errors.js'
import { Kiln } from '../models/index.js'
import type { Studio } from '../models/index.js'
import type { Scope } from '../policies/index.js'
import { recordAudit } from './recordAudit.js'
import { insertRow, updateRow } from './rows.js'
import { orTaken } from './taken.js'

/** What a form says of a kiln; its studio is given beside it. */
export type KilnInput = Omit<z.output<typeof kilnInput>, 'studio'>

function valuesOf({ name, litres, heat, shelves, note }: KilnInput) {
  return { name, litres, heat, shelves, note }
}

const NAME_TAKEN = 'Another kiln of this studio has this name.'

function audited({ name, litres, heat, shelves, note }: Kiln): Record<string, unknown> {
  return { name, litres, heat, shelves, note }
}

/** Adds a kiln to a studio. @throws AppError `taken`, `invalid` for an archived studio */
export function createKiln(
  scope: Scope,
  studio: Studio,
  input: KilnInput,
  deps: Pick<Deps, 'sequelize' | 'clock'>,
): Promise<Kiln> {
  if (studio.archivedAt) throw invalid({ studio: 'This studio is archived: bring it back first.' })
  const { networkId, id: studioId } = studio
  return inTransaction(deps.sequelize, async (transaction) => {
    const kiln = await orTaken(
      () => insertRow(Kiln, { ...valuesOf(input), networkId, studioId, uid: v7() }, transaction),
      NAME_TAKEN,
    )
    const change = { subject: 'kiln', subjectUid: kiln.uid, studioId }
    await recordAudit(
      scope,
      deps,
      { ...change, action: 'kiln.created', after: audited(kiln) },
      transaction,
    )
    return kiln
  })
}

/** Changes a kiln; it stays in its studio, as its firings do. @throws AppError `taken` */
export function changeKiln(
  scope: Scope,
  kiln: Kiln,
  input: KilnInput,
  deps: Pick<Deps, 'sequelize' | 'clock'>,
): Promise<Kiln> {
  const before = audited(kiln)
  return inTransaction(deps.sequelize, async (transaction) => {
    const after = await orTaken(() => updateRow(kiln, valuesOf(input), transaction), NAME_TAKEN)
    const change = { subject: 'kiln', subjectUid: kiln.uid, studioId: kiln.studioId }
    await recordAudit(
      scope,
      deps,
      { ...change, action: 'kiln.changed', before, after: audited(after) },
      transaction,
    )
    return after
  })
}
