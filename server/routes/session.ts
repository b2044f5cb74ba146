import type { Request, Response } from 'express'
import { endSessions, noteSeen } from '../commands/sessions.js'
import { PATHS } from '../contract/paths.js'
import { sessionOutput, signInInput } from '../contract/session.js'
import type { Session } from '../contract/session.js'
import type { Deps } from '../deps.js'
import { AppError } from '../errors.js'
import type { SignedInUser } from '../middleware/authenticate.js'
import { endSession } from '../middleware/sessionLife.js'
import { presentSession } from '../presenters/session.js'
import { demoAccounts } from '../queries/demoAccounts.js'
import { networksOfPerson } from '../queries/networksOfPerson.js'
import { defineRoute } from './defineRoute.js'
import type { Route } from './defineRoute.js'

/** The whole answer of the session routes: what the client needs before its first page. */
export async function sessionOf(person: SignedInUser | null, deps: Deps): Promise<Session> {
  const networks = person ? await networksOfPerson(person.id) : []
  const demo = deps.config.demo ? await demoAccounts(deps.sequelize) : []
  return presentSession(person, networks, demo)
}

/** A cookie for TLS alone cannot be set over a connection that we take for a plain one: better to say so. */
export function requireTls({ config }: Deps, req: Request): void {
  if (!config.baseUrl.startsWith('https:') || req.secure) return
  throw new AppError(
    'unavailable',
    'This address is served over https, but the request arrived without it: the server needs TRUST_PROXY.',
  )
}

/** Sign in, sign out, who am I. `signIn` checks the body's credentials and gives the session a new id. */
export function sessionRoutes(
  signIn: (req: Request, res: Response) => Promise<SignedInUser>,
): readonly Route[] {
  return [
    defineRoute({
      method: 'get',
      path: PATHS.session,
      ability: 'public',
      output: sessionOutput,
      handle: async ({ user, deps }) => {
        if (user) await noteSeen(user.id, deps)
        return sessionOf(user ?? null, deps)
      },
    }),
    defineRoute({
      method: 'post',
      path: PATHS.session,
      ability: 'public',
      body: signInInput,
      output: sessionOutput,
      handle: async ({ deps, req, res }) => {
        requireTls(deps, req)
        const user = await signIn(req, res)
        await noteSeen(user.id, deps)
        return sessionOf(user, deps)
      },
    }),
    defineRoute({
      method: 'delete',
      path: PATHS.session,
      // Signing out twice is no error.
      ability: 'public',
      output: sessionOutput,
      handle: async ({ deps, req, res }) => {
        await endSession(req, res)
        return sessionOf(null, deps)
      },
    }),
    defineRoute({
      method: 'delete',
      path: PATHS.sessions,
      ability: 'signed-in',
      output: sessionOutput,
      handle: async ({ user, deps, req, res }) => {
        await endSession(req, res)
        await endSessions(user.id, deps)
        return sessionOf(null, deps)
      },
    }),
  ]
}
