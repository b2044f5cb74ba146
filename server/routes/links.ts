import { z } from 'zod'
import { lookAtLink, redeemLink } from '../commands/oneTimeLinks.js'
import { PATHS } from '../contract/paths.js'
import { linkOutput, sessionOutput, useLinkInput } from '../contract/session.js'
import { startSession } from '../middleware/sessionLife.js'
import { defineRoute } from './defineRoute.js'
import type { Route } from './defineRoute.js'
import { requireTls, sessionOf } from './session.js'

const params = z.object({ token: z.string().regex(/^[\w-]{20,100}$/) })

/** One-time links: whoever holds one may set the password of the person it is for, once. */
export const linkRoutes: readonly Route[] = [
  defineRoute({
    method: 'get',
    path: PATHS.link,
    ability: 'public',
    params,
    output: linkOutput,
    handle: ({ params, deps }) => lookAtLink(params.token, deps),
  }),
  defineRoute({
    method: 'post',
    path: PATHS.link,
    ability: 'public',
    params,
    body: useLinkInput,
    output: sessionOutput,
    handle: async ({ params, body, deps, req }) => {
      requireTls(deps, req)
      const user = await redeemLink(params.token, body.password, deps)
      await startSession(req, user)
      return sessionOf(user, deps)
    },
  }),
]
