import { z } from 'zod'
import { createStudio, changeStudio } from '../commands/saveStudio.js'
import { setArchived } from '../commands/setArchived.js'
import { archivedInput, studio, studioInput, studiosOutput } from '../contract/catalogue.js'
import { uid } from '../contract/common.js'
import { PATHS } from '../contract/paths.js'
import { presentStudio } from '../presenters/studio.js'
import { kilnCounts } from '../queries/kilnsOfStudios.js'
import { studiosOfNetwork } from '../queries/studiosOfNetwork.js'
import type { Scope } from '../policies/index.js'
import { defineRoute } from './defineRoute.js'
import type { Route } from './defineRoute.js'
import { seenStudio, seenStudioIds } from './visible.js'

const params = z.object({ studio: uid })

type StudioRow = Awaited<ReturnType<typeof seenStudio>>

async function present(row: StudioRow, scope: Scope) {
  const counts = await kilnCounts(scope)
  return presentStudio(row, counts.get(row.id) ?? 0, scope)
}

async function load({ params, scope }: { params: { studio: string }; scope: Scope }) {
  const row = await seenStudio(scope, params.studio)
  return { row, studioId: row.id }
}

/** Studios of a network: settings. */
export const studioRoutes: readonly Route[] = [
  defineRoute({
    method: 'get',
    path: PATHS.studios,
    ability: 'studios.read',
    output: studiosOutput,
    handle: async ({ scope }) => {
      const [rows, counts] = await Promise.all([
        studiosOfNetwork(scope, seenStudioIds(scope)),
        kilnCounts(scope),
      ])
      return { rows: rows.map((row) => presentStudio(row, counts.get(row.id) ?? 0, scope)) }
    },
  }),
  defineRoute({
    method: 'post',
    path: PATHS.studios,
    ability: 'studios.create',
    body: studioInput,
    status: 201,
    output: studio,
    handle: async ({ scope, body, deps }) =>
      presentStudio(await createStudio(scope, body, deps), 0, scope),
  }),
  defineRoute({
    method: 'patch',
    path: PATHS.studio,
    ability: 'studios.edit',
    params,
    body: studioInput,
    load,
    output: studio,
    handle: async ({ scope, loaded, body, deps }) =>
      present(await changeStudio(scope, loaded.row, body, deps), scope),
  }),
  defineRoute({
    method: 'put',
    path: PATHS.studioArchived,
    ability: 'studios.edit',
    params,
    body: archivedInput,
    load,
    output: studio,
    handle: async ({ scope, loaded, body, deps }) =>
      present(await setArchived(scope, loaded.row, body.archived, deps), scope),
  }),
]
