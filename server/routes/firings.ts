import { z } from 'zod'
import { countsByRevision } from '../commands/countsByRevision.js'
import { saveRevision } from '../commands/saveRevision.js'
import { voidFiring } from '../commands/voidFiring.js'
import { uid } from '../contract/common.js'
import {
  FIRING_SORTS,
  firingFilters,
  firingOutput,
  firingsInput,
  firingsOutput,
  lastFiringInput,
  lastFiringOutput,
  revisionInput,
  revisionOutput,
  voidInput,
} from '../contract/firings.js'
import type { FiringDetail } from '../contract/firings.js'
import { PATHS } from '../contract/paths.js'
import type { Deps } from '../deps.js'
import { notFound } from '../errors.js'
import { can } from '../policies/index.js'
import type { Scope } from '../policies/index.js'
import {
  presentFiring,
  presentFiringRow,
  presentPayload,
  presentRevision,
} from '../presenters/firing.js'
import { FIRING_CSV_HEADINGS, presentFiringCsv } from '../presenters/firingCsv.js'
import {
  findFiring,
  findKiln,
  findRevisionByNumber,
  firingDetail,
  lastFiringOf,
} from '../queries/firingDetail.js'
import { countFirings, everyFiring, firingIds, firingRows } from '../queries/firingRows.js'
import { firingWhere } from '../queries/firingWhere.js'
import type { FiringFilters, FiringWhere } from '../queries/firingWhere.js'
import { defineRoute } from './defineRoute.js'
import type { Route } from './defineRoute.js'
import { readableStudios } from './readable.js'
import { sendCsv } from './sendCsv.js'

const network = z.string()
const ofFiring = z.object({ network, firing: uid })

function whereOf(scope: Scope, filters: FiringFilters): Promise<FiringWhere> {
  return firingWhere(scope.networkId, readableStudios(scope, 'firings.read'), filters)
}

/** The firing of the path, where the person may read it. */
async function load({ scope, params }: { scope: Scope; params: { firing: string } }) {
  const firing = await findFiring(scope.networkId, params.firing)
  if (!firing || !can(scope, 'firings.read', firing)) throw notFound()
  return firing
}

async function show(id: number, scope: Scope, { sequelize }: Deps): Promise<FiringDetail> {
  const [detail, rows] = await Promise.all([
    firingDetail(scope.networkId, id),
    firingRows(sequelize, scope.networkId, [id]),
  ])
  const [row] = rows
  if (!row) throw notFound()
  return presentFiring(row, detail, countsByRevision(detail.revisions), scope)
}

const readRoutes = [
  defineRoute({
    method: 'get',
    path: PATHS.firings,
    ability: 'firings.read',
    query: firingsInput,
    output: firingsOutput,
    handle: async ({ scope, query, deps }) => {
      const { page, pageSize, sort, ...filters } = query
      const where = await whereOf(scope, filters)
      const [total, ids] = await Promise.all([
        countFirings(deps.sequelize, where),
        firingIds(deps.sequelize, where, sort, { limit: pageSize, offset: (page - 1) * pageSize }),
      ])
      const rows = await firingRows(deps.sequelize, scope.networkId, ids)
      return { rows: rows.map((row) => presentFiringRow(row, scope)), total, page, pageSize }
    },
  }),
  defineRoute({
    method: 'get',
    path: PATHS.firingsCsv,
    ability: 'firings.read',
    query: firingFilters.extend({ sort: z.enum(FIRING_SORTS).default('-date') }),
    output: 'raw',
    handle: async ({ scope, query, deps, res }) => {
      const { sort, ...filters } = query
      const firings = everyFiring(
        deps.sequelize,
        scope.networkId,
        await whereOf(scope, filters),
        sort,
      )
      const rows = async function* () {
        for await (const firing of firings) yield presentFiringCsv(firing)
      }
      await sendCsv(res, `firings-${scope.network.slug}.csv`, FIRING_CSV_HEADINGS, rows())
    },
  }),
  defineRoute({
    method: 'get',
    path: PATHS.lastFiring,
    ability: 'firings.read',
    query: lastFiringInput,
    load: async ({ scope, query }) => {
      const kiln = await findKiln(scope.networkId, query.kiln)
      if (!kiln || !can(scope, 'firings.read', kiln)) throw notFound()
      return kiln
    },
    output: lastFiringOutput,
    handle: async ({ scope, query, loaded, deps }) => {
      const id = await lastFiringOf(scope.networkId, loaded.id, query.kind)
      return { firing: id === null ? null : await show(id, scope, deps) }
    },
  }),
  defineRoute({
    method: 'get',
    path: PATHS.firing,
    ability: 'firings.read',
    params: ofFiring,
    load,
    output: firingOutput,
    handle: ({ scope, loaded, deps }) => show(loaded.id, scope, deps),
  }),
  defineRoute({
    method: 'get',
    path: PATHS.firingRevision,
    ability: 'firings.read',
    params: z.object({ network, firing: uid, revision: z.coerce.number().int().min(1) }),
    load,
    output: revisionOutput,
    handle: async ({ scope, params, loaded }) => {
      const revision = await findRevisionByNumber(scope.networkId, loaded.id, params.revision)
      if (!revision) throw notFound()
      const { revisions } = await firingDetail(scope.networkId, loaded.id)
      const inside = can(scope, 'firings.makers', loaded)
      const counts = countsByRevision(revisions)
      return {
        ...presentRevision(revision, counts, null),
        payload: presentPayload(revision.payload, inside),
      }
    },
  }),
]

const writeRoutes = [
  defineRoute({
    method: 'put',
    path: PATHS.firingRevision,
    // Packing, reporting and amending are held by the same roles; the command asks the ability of the revision's kind.
    ability: 'firings.pack',
    params: z.object({ network, firing: uid, revision: uid }),
    body: revisionInput,
    load: async (context) => {
      const firing = await findFiring(context.scope.networkId, context.params.firing)
      return firing ? load(context) : null
    },
    output: firingOutput,
    handle: async ({ scope, params, body, deps }) => {
      await saveRevision(
        scope,
        { firing: params.firing, revision: params.revision, input: body },
        deps,
      )
      const { id } = await load({ scope, params })
      return show(id, scope, deps)
    },
  }),
  defineRoute({
    method: 'post',
    path: PATHS.firingVoid,
    ability: 'firings.void',
    params: ofFiring,
    body: voidInput,
    load,
    output: firingOutput,
    handle: async ({ scope, params, body, loaded, deps }) => {
      await voidFiring(scope, { firing: params.firing, ...body }, deps)
      return show(loaded.id, scope, deps)
    },
  }),
]

/** Firings: list, CSV, one whole with its history, and the writes that every report goes through. */
export const firingRoutes: readonly Route[] = [...readRoutes, ...writeRoutes]
