import type { Transaction } from 'sequelize'
import { Op } from 'sequelize'
import { v7 } from 'uuid'
import type { z } from 'zod'
import { attributesOf, isPractice } from '../contract/catalogue.js'
import type { LevelAttributes, levelInput } from '../contract/catalogue.js'
import { inTransaction } from '../database/inTransaction.js'
import type { Deps } from '../deps.js'
import { invalid } from '../errors.js'
import { Level } from '../models/index.js'
import type { Studio } from '../models/index.js'
import type { Scope } from '../policies/index.js'
import { recordAudit } from './recordAudit.js'
import { insertRow, updateRow } from './rows.js'
import { orTaken } from './taken.js'

export type LevelInput = Omit<z.output<typeof levelInput>, 'studio'>
type Parts = Pick<Deps, 'sequelize' | 'clock'>

const NAME_TAKEN = 'This list has an entry with this name already.'
/** After the fixed ones, whose places count from 0; among themselves by name. */
const OWN_POSITION = 1000

function audited({ factor, name, isReference, attributes }: Level): Record<string, unknown> {
  return { factor, name, isReference, attributes }
}

function valuesOf({ factor, name, isReference, attributes }: LevelInput) {
  return { factor, name, isReference, attributes: kept(factor, attributes) }
}

/** The keys that count for the factor; a key that was not sent stays away. */
function kept(factor: string, attributes: LevelAttributes): Record<string, unknown> {
  const entries = attributesOf(factor).map((key) => [key, attributes[key]] as const)
  return Object.fromEntries(entries.filter(([, value]) => value !== undefined && value !== null))
}

function check({ factor, isReference, attributes }: LevelInput): void {
  const fields: Record<string, string> = {}
  const { startsOn, endsOn } = attributes
  if (startsOn && endsOn && endsOn < startsOn) {
    fields['attributes.endsOn'] = 'The last day is before the first.'
  }
  if (isReference && !isPractice(factor)) {
    fields.isReference = 'Only a practice can be the reference.'
  }
  if (Object.keys(fields).length > 0) throw invalid(fields)
}

/** One reference a list: the one that was it is it no more. */
async function onlyReference(level: Level, transaction: Transaction): Promise<void> {
  const { networkId, factor, studioId, id } = level
  await Level.update(
    { isReference: false },
    {
      where: { networkId, factor, studioId, isReference: true, id: { [Op.ne]: id } },
      transaction,
    },
  )
}

/**
 * Adds an entry to a list of a studio, or of the network (studio null).
 * @throws AppError `taken`, `invalid`
 */
export function createLevel(
  scope: Scope,
  studio: Studio | null,
  input: LevelInput,
  deps: Parts,
): Promise<Level> {
  check(input)
  if (studio?.archivedAt) throw invalid({ studio: 'This studio is archived: bring it back first.' })
  const { networkId } = scope
  const studioId = studio?.id ?? null
  const row = { ...valuesOf(input), networkId, studioId, uid: v7(), position: OWN_POSITION }
  return inTransaction(deps.sequelize, async (transaction) => {
    const level = await orTaken(() => insertRow(Level, row, transaction), NAME_TAKEN)
    if (level.isReference) await onlyReference(level, transaction)
    const change = { subject: 'level', subjectUid: level.uid, studioId }
    await recordAudit(
      scope,
      deps,
      { ...change, action: 'level.created', after: audited(level) },
      transaction,
    )
    return level
  })
}

/** Changes an entry; its list stays. @throws AppError `taken`, `invalid` */
export function changeLevel(
  scope: Scope,
  level: Level,
  input: LevelInput,
  deps: Parts,
): Promise<Level> {
  check(input)
  if (input.isReference && level.archivedAt) {
    throw invalid({ isReference: 'An archived practice cannot be the reference.' })
  }
  const before = audited(level)
  return inTransaction(deps.sequelize, async (transaction) => {
    const after = await orTaken(() => updateRow(level, valuesOf(input), transaction), NAME_TAKEN)
    if (after.isReference) await onlyReference(after, transaction)
    const change = { subject: 'level', subjectUid: level.uid, studioId: level.studioId }
    await recordAudit(
      scope,
      deps,
      { ...change, action: 'level.changed', before, after: audited(after) },
      transaction,
    )
    return after
  })
}
