import { changeAccount, changePassword } from '../commands/changeAccount.js'
import { nothing } from '../contract/common.js'
import { PATHS } from '../contract/paths.js'
import { accountInput, changePasswordInput, sessionOutput } from '../contract/session.js'
import { startSession } from '../middleware/sessionLife.js'
import { defineRoute } from './defineRoute.js'
import type { Route } from './defineRoute.js'
import { sessionOf } from './session.js'

/** The person's own account. */
export const accountRoutes: readonly Route[] = [
  defineRoute({
    method: 'patch',
    path: PATHS.account,
    ability: 'signed-in',
    body: accountInput,
    output: sessionOutput,
    handle: async ({ user, body, deps }) => sessionOf(await changeAccount(user.id, body), deps),
  }),
  defineRoute({
    method: 'put',
    path: PATHS.accountPassword,
    ability: 'signed-in',
    body: changePasswordInput,
    output: nothing,
    handle: async ({ user, body, deps, req }) => {
      const { id, email } = user
      const changed = await changePassword({ id, email, address: req.ip ?? '' }, body, deps)
      await startSession(req, changed)
      return {}
    },
  }),
]
