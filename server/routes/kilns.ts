import { z } from 'zod'
import { changeKiln, createKiln } from '../commands/saveKiln.js'
import { setArchived } from '../commands/setArchived.js'
import { archivedInput, kiln, kilnInput, kilnsOutput } from '../contract/catalogue.js'
import { uid } from '../contract/common.js'
import { PATHS } from '../contract/paths.js'
import { invalid } from '../errors.js'
import type { Scope } from '../policies/index.js'
import { presentKiln } from '../presenters/kiln.js'
import { kilnsOfStudios } from '../queries/kilnsOfStudios.js'
import { studiosOfNetwork } from '../queries/studiosOfNetwork.js'
import { defineRoute } from './defineRoute.js'
import type { Route } from './defineRoute.js'
import { seenKiln, seenStudio, seenStudioIds } from './visible.js'

const params = z.object({ kiln: uid })

async function load({ params, scope }: { params: { kiln: string }; scope: Scope }) {
  const row = await seenKiln(scope, params.kiln)
  const [home] = await studiosOfNetwork(scope, [row.studioId])
  return { row, home: { uid: home?.uid ?? '', name: home?.name ?? '' }, studioId: row.studioId }
}

/** Kilns of the studios that the person sees: settings. */
export const kilnRoutes: readonly Route[] = [
  defineRoute({
    method: 'get',
    path: PATHS.kilns,
    ability: 'kilns.read',
    output: kilnsOutput,
    handle: async ({ scope }) => {
      const ids = seenStudioIds(scope)
      const [rows, studios] = await Promise.all([
        kilnsOfStudios(scope, ids),
        studiosOfNetwork(scope, ids),
      ])
      const homes = new Map(studios.map((studio) => [studio.id, studio]))
      return {
        rows: rows.flatMap((row) => {
          const home = homes.get(row.studioId)
          return home ? [presentKiln(row, home, scope)] : []
        }),
      }
    },
  }),
  defineRoute({
    method: 'post',
    path: PATHS.kilns,
    ability: 'kilns.edit',
    body: kilnInput,
    load: async ({ scope, body }) => {
      const home = await seenStudio(scope, body.studio)
      return { home, studioId: home.id }
    },
    status: 201,
    output: kiln,
    handle: async ({ scope, loaded, body, deps }) => {
      const row = await createKiln(scope, loaded.home, body, deps)
      return presentKiln(row, loaded.home, scope)
    },
  }),
  defineRoute({
    method: 'patch',
    path: PATHS.kiln,
    ability: 'kilns.edit',
    params,
    body: kilnInput,
    load,
    output: kiln,
    handle: async ({ scope, loaded, body, deps }) => {
      if (body.studio !== loaded.home.uid) throw invalid({ studio: 'A kiln stays in its studio.' })
      return presentKiln(await changeKiln(scope, loaded.row, body, deps), loaded.home, scope)
    },
  }),
  defineRoute({
    method: 'put',
    path: PATHS.kilnArchived,
    ability: 'kilns.edit',
    params,
    body: archivedInput,
    load,
    output: kiln,
    handle: async ({ scope, loaded, body, deps }) => {
      const row = await setArchived(scope, loaded.row, body.archived, deps)
      return presentKiln(row, loaded.home, scope)
    },
  }),
]
