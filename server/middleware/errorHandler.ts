import type { ErrorRequestHandler, Request, RequestHandler } from 'express'
import type { Logger } from '../logger.js'
import { AppError, notFound } from '../errors.js'
import type { ErrorBody } from '../contract/common.js'

/** Answers what no route of the API took. */
export const noSuchRoute: RequestHandler = () => {
  throw notFound()
}

/** body-parser's own errors, by their `type`. */
function fromParser(error: unknown): AppError | null {
  const type = (error as { type?: unknown }).type
  if (type === 'entity.too.large') return new AppError('too-large', 'That is too much at once.')
  if (type === 'entity.parse.failed')
    return new AppError('invalid', 'The request is not valid JSON.')
  return null
}

/** The pattern of the path where a route was reached: the path itself may hold the token of a link. */
function pathOf(req: Request): string {
  return (req.route as { path?: string } | undefined)?.path ?? req.path
}

/** One shape for every error; what we did not foresee is logged whole and told as little as possible. */
export function errorHandler(logger: Logger): ErrorRequestHandler {
  return (error: unknown, req, res, next) => {
    if (res.headersSent) return next(error)
    const known = error instanceof AppError ? error : fromParser(error)
    if (!known)
      logger.error({ err: error, requestId: req.requestId, path: pathOf(req) }, 'request failed')
    const shown =
      known ?? new AppError('unexpected', 'Something went wrong on our side. It has been noted.')
    const body: ErrorBody = {
      error: {
        code: shown.code,
        message: shown.message,
        ...(shown.extra.fields && { fields: shown.extra.fields }),
        ...(shown.extra.details && { details: shown.extra.details }),
        requestId: req.requestId,
      },
    }
    res.status(shown.status).json(body)
  }
}
