/** Codes of the API's errors: each says what the caller can do. */
export const ERROR_STATUS = {
  'sign-in': 401,
  forbidden: 403,
  'cross-site': 403,
  'not-found': 404,
  stale: 409,
  'different-body': 409,
  'in-use': 409,
  taken: 409,
  'too-large': 413,
  invalid: 422,
  'too-many': 429,
  unexpected: 500,
  unavailable: 503,
} as const
export type ErrorCode = keyof typeof ERROR_STATUS

/** An error that the caller is meant to see. Anything else that is thrown answers 500 `unexpected`. */
export class AppError extends Error {
  constructor(
    readonly code: ErrorCode,
    message: string,
    readonly extra: {
      /** Messages by field path. */
      fields?: Record<string, string>
      details?: Record<string, unknown>
    } = {},
  ) {
    super(message)
    this.name = 'AppError'
  }

  get status(): number {
    return ERROR_STATUS[this.code]
  }
}

/** A row that is missing and a row of another network get this same answer. */
export function notFound(): AppError {
  return new AppError('not-found', 'There is nothing here, or it is not yours to see.')
}

export function forbidden(): AppError {
  return new AppError('forbidden', 'Your role does not allow this.')
}

/** One or more fields that cannot be; all problems of a form at once. */
export function invalid(
  fields: Record<string, string>,
  message = 'Some fields need a change.',
): AppError {
  return new AppError('invalid', message, { fields })
}
