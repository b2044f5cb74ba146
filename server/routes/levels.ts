import { z } from 'zod'
import { changeLevel, createLevel } from '../commands/saveLevel.js'
import { setArchived } from '../commands/setArchived.js'
import {
  archivedInput,
  level,
  levelInput,
  levelsInput,
  levelsOutput,
} from '../contract/catalogue.js'
import { uid } from '../contract/common.js'
import { PATHS } from '../contract/paths.js'
import type { Deps } from '../deps.js'
import { AppError, invalid } from '../errors.js'
import type { Scope } from '../policies/index.js'
import { presentLevel } from '../presenters/level.js'
import { levelsOfStudios } from '../queries/levelsOfStudios.js'
import { levelUses } from '../queries/levelUses.js'
import { studiosOfNetwork } from '../queries/studiosOfNetwork.js'
import { factor } from '../shared/factors.js'
import { defineRoute } from './defineRoute.js'
import type { Route } from './defineRoute.js'
import { seenLevel, seenStudio, seenStudioIds } from './visible.js'

const params = z.object({ level: uid })

type LevelRow = Awaited<ReturnType<typeof seenLevel>>

async function load({ params, scope }: { params: { level: string }; scope: Scope }) {
  const row = await seenLevel(scope, params.level)
  return { row, studioId: row.studioId }
}

/** Rows with their studios and uses: two more queries, however many rows. */
async function present(rows: readonly LevelRow[], scope: Scope, { sequelize }: Deps) {
  const factors = [...new Set(rows.map((row) => row.factor))]
  const [studios, uses] = await Promise.all([
    studiosOfNetwork(scope, seenStudioIds(scope)),
    levelUses(scope, factors, sequelize),
  ])
  const homes = new Map(studios.map((studio) => [studio.id, studio]))
  return rows.map((row) => {
    const studio = row.studioId === null ? null : (homes.get(row.studioId) ?? null)
    return presentLevel(row, { studio, uses: uses.get(row.id) ?? 0 }, scope)
  })
}

async function presentOne(row: LevelRow, scope: Scope, deps: Deps) {
  const [view] = await present([row], scope, deps)
  if (!view) throw new Error('A level was not presented')
  return view
}

/** Lists of a studio or of the whole network: settings. */
export const levelRoutes: readonly Route[] = [
  defineRoute({
    method: 'get',
    path: PATHS.levels,
    ability: 'catalogue.read',
    query: levelsInput,
    output: levelsOutput,
    handle: async ({ scope, query, deps }) => {
      const rows = await levelsOfStudios(scope, {
        studioIds: seenStudioIds(scope),
        factors: query.factor,
        archived: query.archived === 'true',
      })
      return { rows: await present(rows, scope, deps) }
    },
  }),
  defineRoute({
    method: 'post',
    path: PATHS.levels,
    ability: 'catalogue.edit',
    body: levelInput,
    load: async ({ scope, body }) => {
      const home = body.studio === null ? null : await seenStudio(scope, body.studio)
      return { home, studioId: home?.id ?? null }
    },
    status: 201,
    output: level,
    handle: async ({ scope, loaded, body, deps }) =>
      presentOne(await createLevel(scope, loaded.home, body, deps), scope, deps),
  }),
  defineRoute({
    method: 'patch',
    path: PATHS.level,
    ability: 'catalogue.edit',
    params,
    body: levelInput,
    load,
    output: level,
    handle: async ({ scope, loaded, body, deps }) => {
      const home = body.studio === null ? null : await seenStudio(scope, body.studio)
      const fields = {
        ...((home?.id ?? null) !== loaded.studioId && { studio: 'An entry stays in its list.' }),
        ...(body.factor !== loaded.row.factor && { factor: 'An entry stays in its list.' }),
      }
      if (Object.keys(fields).length > 0) throw invalid(fields)
      return presentOne(await changeLevel(scope, loaded.row, body, deps), scope, deps)
    },
  }),
  defineRoute({
    method: 'put',
    path: PATHS.levelArchived,
    ability: 'catalogue.edit',
    params,
    body: archivedInput,
    load,
    output: level,
    handle: async ({ scope, loaded, body, deps }) => {
      if (!factor(loaded.row.factor)?.catalogue) {
        throw new AppError('invalid', 'This list is the same in every network: its entries stay.')
      }
      return presentOne(await setArchived(scope, loaded.row, body.archived, deps), scope, deps)
    },
  }),
]
