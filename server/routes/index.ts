import { accountRoutes } from './account.js'
import { catalogueRoutes } from './catalogue.js'
import type { Route } from './defineRoute.js'
import { findingRoutes } from './findings.js'
import { firingRoutes } from './firings.js'
import { jobRoutes } from './jobs.js'
import { kilnRoutes } from './kilns.js'
import { levelRoutes } from './levels.js'
import { linkRoutes } from './links.js'
import { lossRoutes } from './losses.js'
import { peopleRoutes } from './people.js'
import { studioRoutes } from './studios.js'
import { todayRoutes } from './today.js'

/**
 * Every route below a network, and the account's own. Sign-in and health are mounted apart (app.ts).
 * A test walks this list as every kind of stranger.
 */
export const ROUTES: readonly Route[] = [
  ...linkRoutes,
  ...accountRoutes,
  ...catalogueRoutes,
  ...studioRoutes,
  ...kilnRoutes,
  ...levelRoutes,
  ...peopleRoutes,
  ...firingRoutes,
  ...lossRoutes,
  ...todayRoutes,
  ...findingRoutes,
  ...jobRoutes,
]
