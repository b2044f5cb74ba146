import type { Transaction } from 'sequelize'
import { v7 } from 'uuid'
import type { z } from 'zod'
import type { studioInput } from '../contract/catalogue.js'
import { inTransaction } from '../database/inTransaction.js'
import type { Deps } from '../deps.js'
import { Network, Studio } from '../models/index.js'
import type { Scope } from '../policies/index.js'
import { recordAudit } from './recordAudit.js'
import { insertRow, updateRow } from './rows.js'
import { orTaken } from './taken.js'

export type StudioInput = z.output<typeof studioInput>

const MOST_SLUG = 50
const NAME_TAKEN = 'Another studio of this network has this name.'

function audited(studio: Studio): Record<string, unknown> {
  const { name, timeZone, currency, temperatureUnit, lengthUnit, weekStart, appearance } = studio
  return { name, timeZone, currency, temperatureUnit, lengthUnit, weekStart, appearance }
}

/** A name as a part of an address: "Café & Kiln" is "cafe-kiln"; never empty. */
export function slugOf(name: string): string {
  const plain = name.normalize('NFKD').replace(/\p{M}/gu, '').toLowerCase()
  const slug = plain
    .replace(/[^a-z0-9]+/g, '-')
    .slice(0, MOST_SLUG)
    .replace(/^-+|-+$/g, '')
  return slug || 'studio'
}

/** The first of `slug`, `slug-2`, `slug-3` ... that is free. */
function freeSlug(name: string, taken: ReadonlySet<string>): string {
  const slug = slugOf(name)
  for (let n = 1; ; n += 1) {
    const tried = n === 1 ? slug : `${slug}-${n}`
    if (!taken.has(tried)) return tried
  }
}

const A = 65
const LETTERS = 26

/** A, B ... Z, AA, AB ... ZZ: how a studio appears to the others that would not be named. */
function letterAt(index: number): string {
  const last = String.fromCharCode(A + (index % LETTERS))
  return index < LETTERS ? last : letterAt(Math.floor(index / LETTERS) - 1) + last
}

/** The first letter that no studio has had; null past ZZ. Letters are not used again. */
function freeLetter(taken: ReadonlySet<string | null>): string | null {
  for (let index = 0; index < LETTERS * (LETTERS + 1); index += 1) {
    const letter = letterAt(index)
    if (!taken.has(letter)) return letter
  }
  return null
}

/** Makes a studio with a slug of its name and the next free letter. @throws AppError `taken` */
export async function createStudio(
  scope: Scope,
  input: StudioInput,
  deps: Pick<Deps, 'sequelize' | 'clock'>,
  transaction?: Transaction,
): Promise<Studio> {
  if (!transaction) {
    return inTransaction(deps.sequelize, (own) => createStudio(scope, input, deps, own))
  }
  const { networkId } = scope
  // One at a time in a network, so that slugs and letters are given once.
  await Network.findByPk(networkId, { transaction, lock: transaction.LOCK.UPDATE })
  const others = await Studio.findAll({ where: { networkId }, transaction })
  const slug = freeSlug(input.name, new Set(others.map((studio) => studio.slug)))
  const letter = freeLetter(new Set(others.map((studio) => studio.letter)))
  const studio = await orTaken(
    () => insertRow(Studio, { ...input, networkId, uid: v7(), slug, letter }, transaction),
    NAME_TAKEN,
  )
  const change = { subject: 'studio', subjectUid: studio.uid, studioId: studio.id }
  await recordAudit(
    scope,
    deps,
    { ...change, action: 'studio.created', after: audited(studio) },
    transaction,
  )
  return studio
}

/** Changes a studio; its slug and letter stay, so that addresses do. @throws AppError `taken` */
export function changeStudio(
  scope: Scope,
  studio: Studio,
  input: StudioInput,
  deps: Pick<Deps, 'sequelize' | 'clock'>,
): Promise<Studio> {
  const before = audited(studio)
  return inTransaction(deps.sequelize, async (transaction) => {
    const after = await orTaken(() => updateRow(studio, input, transaction), NAME_TAKEN)
    const change = { subject: 'studio', subjectUid: studio.uid, studioId: studio.id }
    await recordAudit(
      scope,
      deps,
      { ...change, action: 'studio.changed', before, after: audited(after) },
      transaction,
    )
    return after
  })
}
