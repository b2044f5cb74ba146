import type { Route } from './defineRoute.js'

/**
 * Every route below a network, and the account's own. Sign-in and health are mounted apart (app.ts).
 * A test walks this list as every kind of stranger.
 */
export const ROUTES: readonly Route[] = []
