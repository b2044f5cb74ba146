import { z } from 'zod'
import { PATHS } from '../contract/paths.js'
import { AppError } from '../errors.js'
import { ping } from '../queries/scopeFor.js'
import { VERSION } from '../version.js'
import { defineRoute } from './defineRoute.js'

const ok = z.object({ status: z.literal('ok') })

/** For whoever watches the process: alive, ready to serve, and what is running. */
export const healthRoutes = [
  defineRoute({
    method: 'get',
    path: '/healthz',
    ability: 'public',
    output: ok,
    handle: async () => ({ status: 'ok' as const }),
  }),
  defineRoute({
    method: 'get',
    path: '/readyz',
    ability: 'public',
    output: ok,
    handle: async ({ deps }) => {
      await ping(deps.sequelize).catch(() => {
        throw new AppError('unavailable', 'The database does not answer.')
      })
      return { status: 'ok' as const }
    },
  }),
  defineRoute({
    method: 'get',
    path: PATHS.version,
    ability: 'public',
    output: z.object({ version: z.string() }),
    handle: async () => ({ version: VERSION }),
  }),
]
