import type { RequestHandler } from 'express'
import { v7 } from 'uuid'

/** Gives each request an id of its own, answered in `X-Request-Id` and in every error. */
export const requestContext: RequestHandler = (req, res, next) => {
  req.requestId = v7()
  res.setHeader('X-Request-Id', req.requestId)
  next()
}
