/** Calls of our own API: JSON in and out, checked with the contract's schemas. */
import type { z } from 'zod'
import { errorBody } from '../../server/contract/common.js'

/** What the API, or the way to it, had to say against a call. */
export class ApiError extends Error {
  /** HTTP status; 0 where no answer came. */
  readonly status: number
  /** What the caller can do (see contract/common): `offline` where no answer came. */
  readonly code: string
  /** Messages by field path. */
  readonly fields: Readonly<Record<string, string>>
  readonly details: Readonly<Record<string, unknown>>
  readonly requestId: string | null

  constructor(problem: {
    status: number
    code: string
    message: string
    fields?: Record<string, string> | undefined
    details?: Record<string, unknown> | undefined
    requestId?: string | undefined
  }) {
    super(problem.message)
    this.name = 'ApiError'
    this.status = problem.status
    this.code = problem.code
    this.fields = problem.fields ?? {}
    this.details = problem.details ?? {}
    this.requestId = problem.requestId ?? null
  }
}

/** Fires `sign-in-needed` when a call is answered with 401. */
export const httpEvents = new EventTarget()

export type Query = Record<string, string | number | boolean | null | undefined>

interface GetOptions<S extends z.ZodType> {
  schema: S
  query?: Query | undefined
  signal?: AbortSignal | undefined
}

interface SendOptions<S extends z.ZodType> {
  method: 'POST' | 'PUT' | 'PATCH' | 'DELETE'
  body?: unknown
  schema?: S
  signal?: AbortSignal | undefined
  /** A wrong password is answered with 401 too; then nobody is sent to the sign-in page. */
  quiet401?: boolean
}

/** GET of a path that starts with `/api`. @throws {ApiError} */
export async function getJson<S extends z.ZodType>(
  path: string,
  { schema, query, signal }: GetOptions<S>,
): Promise<z.output<S>> {
  return parse(schema, await call(withQuery(path, query), { method: 'GET', signal }))
}

/** A call that changes something. Without a schema the answer is not read. @throws {ApiError} */
export async function sendJson<S extends z.ZodType>(
  path: string,
  options: SendOptions<S>,
): Promise<z.output<S>> {
  const { method, body, schema, signal, quiet401 } = options
  const answer = await call(path, { method, body, signal, quiet401 })
  return (schema ? parse(schema, answer) : undefined) as z.output<S>
}

/** A path with its query; what is empty is left out. Serves calls and links (CSV) alike. */
export function withQuery(path: string, query: Query = {}): string {
  const search = new URLSearchParams()
  for (const [key, value] of Object.entries(query))
    if (value !== undefined && value !== null && value !== '') search.set(key, String(value))
  const text = search.toString()
  return text ? `${path}?${text}` : path
}

interface Call {
  method: string
  body?: unknown
  signal?: AbortSignal | undefined
  quiet401?: boolean | undefined
}

async function call(path: string, { method, body, signal, quiet401 }: Call): Promise<unknown> {
  const response = await reach(path, {
    method,
    credentials: 'same-origin',
    headers: {
      accept: 'application/json',
      ...(body === undefined ? {} : { 'content-type': 'application/json' }),
    },
    ...(body === undefined ? {} : { body: JSON.stringify(body) }),
    ...(signal ? { signal } : {}),
  })
  const answer = await readJson(response)
  if (response.ok) return answer
  if (response.status === 401 && !quiet401) httpEvents.dispatchEvent(new Event('sign-in-needed'))
  throw problemOf(response.status, answer)
}

async function reach(path: string, init: RequestInit): Promise<Response> {
  try {
    return await fetch(path, init)
  } catch (error) {
    if (error instanceof DOMException && error.name === 'AbortError') throw error
    throw new ApiError({
      status: 0,
      code: 'offline',
      message: 'The server cannot be reached. Check the connection and try again.',
    })
  }
}

async function readJson(response: Response): Promise<unknown> {
  if (response.status === 204) return {}
  try {
    return await response.json()
  } catch {
    return undefined
  }
}

function problemOf(status: number, answer: unknown): ApiError {
  const known = errorBody.safeParse(answer)
  if (known.success) return new ApiError({ status, ...known.data.error })
  return new ApiError({
    status,
    code: 'unexpected',
    message: `The server answered with an error (${status}). Try again in a moment.`,
  })
}

function parse<S extends z.ZodType>(schema: S, answer: unknown): z.output<S> {
  const result = schema.safeParse(answer)
  if (result.success) return result.data
  throw new ApiError({
    status: 200,
    code: 'unexpected-answer',
    message:
      'The answer of the server has another shape than this page expects. Reload the page: it may be older than the server.',
    details: { issues: result.error.issues.slice(0, 5) },
  })
}
