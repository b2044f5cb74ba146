import type { Transaction } from 'sequelize'
import { v7 } from 'uuid'
import type { Deps } from '../deps.js'
import { nameKey } from '../imports/names.js'
import type { ImportPlan, KnownNames } from '../imports/planImport.js'
import { Kiln, Level, Studio } from '../models/index.js'
import type { Scope } from '../policies/index.js'
import { createStudio } from './saveStudio.js'
import type { Keys } from './writeFirings.js'

export interface NewNames {
  studios: string[]
  kilns: { studio: string; name: string }[]
  levels: { factor: string; studio: string | null; name: string }[]
}

/** uids of what a plan names. */
export interface ImportUids {
  kiln: (studio: string, kiln: string) => string
  /** By place in the plan's list of levels. */
  levels: readonly string[]
}

/** New levels come after the fixed ones, among themselves by name. */
const OWN_POSITION = 1000

/** The network's studios and levels, archived ones too: an old sheet may well name them. */
export async function knownNames(
  { networkId }: Scope,
  transaction: Transaction,
): Promise<KnownNames> {
  const studios = await Studio.findAll({ where: { networkId }, transaction })
  const nameOf = new Map(studios.map(({ id, name }) => [id, name]))
  const levels = await Level.findAll({ where: { networkId, mergedIntoId: null }, transaction })
  return {
    studios: studios.map(({ name }) => name),
    levels: levels.map(({ uid, factor, studioId, code, name }) => ({
      uid,
      factor,
      code: code ?? null,
      name,
      studio: studioId ? (nameOf.get(studioId) ?? null) : null,
    })),
  }
}

/** Makes the studios, kilns and levels that a plan names and the network lacks. */
export async function makeNames(
  scope: Scope,
  plan: ImportPlan,
  deps: Deps,
  transaction: Transaction,
): Promise<{ names: NewNames; keys: Keys; uids: ImportUids }> {
  const studios = await makeStudios(scope, plan, deps, transaction)
  const kilns = await makeKilns(scope, plan, studios.ids, transaction)
  const levels = await makeLevels(scope, plan, studios.ids, transaction)
  const all = await Level.findAll({ where: { networkId: scope.networkId }, transaction })
  return {
    names: { studios: studios.made, kilns: kilns.made, levels: levels.made },
    keys: {
      kilns: new Map(
        [...kilns.rows.values()].map(({ uid, id, studioId }) => [uid, { id, studioId }]),
      ),
      levels: new Map(all.map(({ uid, id }) => [uid, id])),
      classLevels: classLevels(all),
    },
    uids: {
      kiln: (studio, kiln) => must(kilns.rows.get(kilnKey(studio, kiln))).uid,
      levels: levels.uids,
    },
  }
}

/** Ids by the key of the name. */
type StudioIds = ReadonlyMap<string, number>

async function makeStudios(scope: Scope, plan: ImportPlan, deps: Deps, transaction: Transaction) {
  const { networkId, network } = scope
  const present = await Studio.findAll({ where: { networkId }, transaction })
  const ids = new Map(present.map(({ id, name }) => [nameKey(name), id]))
  const made: string[] = []
  for (const { studio: name } of plan.firings) {
    if (ids.has(nameKey(name))) continue
    const { timeZone, currency, temperatureUnit, lengthUnit, weekStart } = network
    const input = {
      name,
      timeZone,
      currency,
      temperatureUnit,
      lengthUnit,
      weekStart,
      appearance: 'name' as const,
    }
    const { id } = await createStudio(scope, input, deps, transaction)
    ids.set(nameKey(name), id)
    made.push(name)
  }
  return { ids: ids as StudioIds, made }
}

function kilnKey(studio: string, kiln: string): string {
  return `${nameKey(studio)}\n${nameKey(kiln)}`
}

async function makeKilns(
  { networkId }: Scope,
  plan: ImportPlan,
  studios: StudioIds,
  transaction: Transaction,
) {
  const present = await Kiln.findAll({ where: { networkId }, transaction })
  const keyOf = new Map([...studios].map(([key, id]) => [id, key]))
  const rows = new Map(
    present.map((kiln) => [`${keyOf.get(kiln.studioId) ?? ''}\n${nameKey(kiln.name)}`, kiln]),
  )
  const made: NewNames['kilns'] = []
  for (const { studio, kiln: name } of plan.firings) {
    const key = kilnKey(studio, name)
    if (rows.has(key)) continue
    const studioId = must(studios.get(nameKey(studio)))
    rows.set(key, await Kiln.create({ networkId, studioId, uid: v7(), name }, { transaction }))
    made.push({ studio, name })
  }
  return { rows, made }
}

async function makeLevels(
  { networkId }: Scope,
  plan: ImportPlan,
  studios: StudioIds,
  transaction: Transaction,
) {
  const uids = plan.levels.map(({ uid }) => uid ?? v7())
  const fresh = plan.levels.flatMap((level, place) =>
    level.uid === null ? [{ ...level, uid: must(uids[place]) }] : [],
  )
  await Level.bulkCreate(
    fresh.map(({ uid, factor, studio, name }) => ({
      networkId,
      uid,
      factor,
      name,
      position: OWN_POSITION,
      studioId: studio === null ? null : must(studios.get(nameKey(studio))),
      attributes: {},
    })),
    { transaction },
  )
  return { uids, made: fresh.map(({ factor, studio, name }) => ({ factor, studio, name })) }
}

/** By uid of a class the level of `class_level` that it stands for. */
function classLevels(levels: readonly Level[]): Map<string, number> {
  const byCode = new Map(
    levels.filter(({ factor }) => factor === 'class_level').map(({ code, id }) => [code ?? '', id]),
  )
  return new Map(
    levels.flatMap(({ factor, uid, attributes }) => {
      const id = factor === 'class' ? byCode.get(String(attributes.classLevel)) : undefined
      return id === undefined ? [] : [[uid, id] as const]
    }),
  )
}

function must<T>(value: T | undefined): T {
  if (value === undefined) throw new Error('An import names something that was not made.')
  return value
}
