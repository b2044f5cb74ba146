import type { SignedInUser } from './authenticate.js'
import type { Scope } from '../policies/index.js'

declare global {
  // eslint-disable-next-line @typescript-eslint/no-namespace -- how Express wants to be told
  namespace Express {
    // eslint-disable-next-line @typescript-eslint/no-empty-object-type -- how passport wants to be told
    interface User extends SignedInUser {}
    interface Request {
      requestId: string
      /** Set by middleware/tenant.ts on paths below a network. */
      scope?: Scope
    }
  }
}
