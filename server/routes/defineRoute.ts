import type { Request, RequestHandler, Response, Router } from 'express'
import { z } from 'zod'
import type { Ability } from '../contract/roles.js'
import type { Deps } from '../deps.js'
import { AppError, forbidden, invalid, notFound } from '../errors.js'
import { can } from '../policies/index.js'
import type { Scope, Target } from '../policies/index.js'
import type { SignedInUser } from '../middleware/authenticate.js'
import type {} from '../middleware/requestTypes.js'

export type Method = 'get' | 'post' | 'put' | 'patch' | 'delete'

/** What a handler is given: everything validated, loaded and authorised. */
export interface Context<P, Q, B, L> {
  params: P
  query: Q
  body: B
  loaded: L
  /** The person's scope in the network of the path; routes outside a network must not touch it. */
  scope: Scope
  /** The signed-in person; routes that are `public` must not touch it. */
  user: SignedInUser
  deps: Deps
  req: Request
  res: Response
}

/**
 * A route is a list of promises, kept in this order: validate, load, authorise, act, present.
 * `ability` is required: an ability of the policies, `signed-in` for the person's own account, or
 * `public`. `load` finds the thing by its uid inside the scope (throwing `notFound()` for what is not
 * there or not to be seen) and returns it with `studioId` when the ability is asked about a studio.
 * `output` is a contract schema; keys that it does not list never leave the server. `raw` handlers
 * (CSV) write to `res` themselves.
 */
export interface RouteSpec<
  P extends z.ZodType,
  Q extends z.ZodType,
  B extends z.ZodType,
  L,
  O extends z.ZodType,
> {
  method: Method
  path: string
  ability: Ability | 'signed-in' | 'public'
  params?: P
  query?: Q
  body?: B
  load?: (
    context: Omit<Context<z.output<P>, z.output<Q>, z.output<B>, undefined>, 'loaded'>,
  ) => Promise<L>
  status?: number
  output: O | 'raw'
  /** `token-in-url`: a foreign origin may post here. */
  csrf?: 'same-origin' | 'token-in-url'
  handle: (context: Context<z.output<P>, z.output<Q>, z.output<B>, L>) => Promise<z.input<O> | void>
}

/** A route as the application mounts it and as tests walk it. */
export interface Route {
  method: Method
  path: string
  ability: Ability | 'signed-in' | 'public'
  csrf: 'same-origin' | 'token-in-url'
  /** The path names a network: middleware/tenant.ts runs before it. */
  tenant: boolean
  /** What it takes, for whoever describes or tries all routes. */
  input: { params?: z.ZodType; query?: z.ZodType; body?: z.ZodType }
  handler: (deps: Deps) => RequestHandler
}

function fieldsOf(error: z.ZodError): Record<string, string> {
  const fields: Record<string, string> = {}
  for (const issue of error.issues) fields[issue.path.join('.') || 'form'] ??= issue.message
  return fields
}

function check<T extends z.ZodType>(schema: T | undefined, value: unknown): z.output<T> {
  if (!schema) return {} as z.output<T>
  const result = schema.safeParse(value ?? {})
  if (!result.success) throw invalid(fieldsOf(result.error))
  return result.data
}

function targetOf(loaded: unknown): Target | undefined {
  if (typeof loaded !== 'object' || loaded === null || !('studioId' in loaded)) return undefined
  return { studioId: (loaded as Target).studioId }
}

/** Makes a route. The order of its steps lives here and nowhere else. */
export function defineRoute<
  P extends z.ZodType = z.ZodObject,
  Q extends z.ZodType = z.ZodObject,
  B extends z.ZodType = z.ZodObject,
  L = undefined,
  O extends z.ZodType = z.ZodObject,
>(spec: RouteSpec<P, Q, B, L, O>): Route {
  const tenant = spec.path.includes('/:network')
  const handler =
    (deps: Deps): RequestHandler =>
    async (req, res) => {
      // A malformed uid in the path is simply not there.
      const params = spec.params?.safeParse(req.params)
      if (params && !params.success) throw notFound()
      const base = {
        params: params?.data as z.output<P>,
        scope: req.scope as Scope,
        user: req.user as SignedInUser,
        deps,
        req,
        res,
      }
      if (spec.ability !== 'public' && !base.user) throw new AppError('sign-in', 'Sign in first.')
      if (tenant && !req.scope) throw notFound()
      // Too low a role is told before its input is judged: a refusal must not teach the form.
      const { ability } = spec
      const asksPolicy = ability !== 'public' && ability !== 'signed-in'
      if (asksPolicy && !can(base.scope, ability)) throw forbidden()
      const input = {
        ...base,
        query: check(spec.query, { ...req.query }),
        body: check(spec.body, req.body),
      }
      const loaded = (spec.load ? await spec.load(input) : undefined) as L
      const target = targetOf(loaded)
      if (asksPolicy && target && !can(base.scope, ability, target)) throw forbidden()
      const answer = await spec.handle({ ...input, loaded })
      if (spec.output === 'raw') return
      const output = spec.output.parse(answer)
      res.status(spec.status ?? 200).json(output)
    }
  return {
    method: spec.method,
    path: spec.path,
    ability: spec.ability,
    csrf: spec.csrf ?? 'same-origin',
    tenant,
    input: { params: spec.params, query: spec.query, body: spec.body },
    handler,
  }
}

/** Mounts routes on a router, in order. */
export function mount(router: Router, routes: readonly Route[], deps: Deps): void {
  for (const route of routes) router[route.method](route.path, route.handler(deps))
}
