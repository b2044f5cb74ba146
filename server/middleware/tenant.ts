import type { RequestHandler } from 'express'
import { scopeFor } from '../queries/scopeFor.js'

/**
 * Turns the network of the path and the person's membership into `req.scope`. A network that does
 * not exist and one that the person is no member of leave it empty: defineRoute answers both 404.
 */
export const tenant: RequestHandler = async (req, _res, next) => {
  const slug = req.params.network
  if (typeof slug === 'string' && req.user) {
    req.scope = (await scopeFor(slug, req.user.id, req.requestId)) ?? undefined
  }
  next()
}
