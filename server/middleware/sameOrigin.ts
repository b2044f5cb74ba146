import type { RequestHandler } from 'express'
import { AppError } from '../errors.js'

const SAFE = ['GET', 'HEAD', 'OPTIONS']

/**
 * Turns away unsafe requests from other sites: `Sec-Fetch-Site` must be `same-origin` where sent,
 * `Origin` must be ours where sent, and one of the two must be there. Cookies are SameSite=Lax
 * besides; the API takes JSON only, which a plain form of another site cannot send.
 * @param origin our public origin, without a slash at the end
 * @param exempt method and path of requests that carry their token in the address
 */
export function sameOrigin(
  origin: string,
  exempt: (method: string, path: string) => boolean,
): RequestHandler {
  return (req, _res, next) => {
    if (SAFE.includes(req.method) || exempt(req.method, req.path)) return next()
    const site = req.get('sec-fetch-site')
    const from = req.get('origin')
    const foreign =
      (site !== undefined && site !== 'same-origin') ||
      (from !== undefined && from !== origin) ||
      (site === undefined && from === undefined)
    if (foreign) throw new AppError('cross-site', 'This request came from another site.')
    next()
  }
}
