import type { SignedInUser } from './authenticate.js'
import type { Scope } from '../policies/index.js'

declare global {
  // eslint-disable-next-line @typescript-eslint/no-namespace
  namespace Express {
    interface User extends SignedInUser {}
    interface Request {
      requestId: string
      /** Set by middleware/tenant.ts on paths below a network. */
      scope?: Scope
    }
  }
}
