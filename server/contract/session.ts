import { z } from 'zod'
import { abilities, uid } from './common.js'
import { role } from './roles.js'

export const preferences = z.object({
  theme: z.enum(['system', 'light', 'dark']).default('system'),
  temperatureUnit: z.enum(['C', 'F']).nullable().default(null),
  lengthUnit: z.enum(['mm', 'in']).nullable().default(null),
})
export type Preferences = z.infer<typeof preferences>

/** A studio that this person may pick, in one network. */
export const sessionStudio = z.object({
  uid,
  slug: z.string(),
  name: z.string(),
  timeZone: z.string(),
  currency: z.string(),
  temperatureUnit: z.enum(['C', 'F']),
  lengthUnit: z.enum(['mm', 'in']),
  weekStart: z.number(),
  /** The person works here (a role in this studio, or in the whole network). */
  abilities,
})

export const sessionNetwork = z.object({
  slug: z.string(),
  name: z.string(),
  timeZone: z.string(),
  temperatureUnit: z.enum(['C', 'F']),
  lengthUnit: z.enum(['mm', 'in']),
  weekStart: z.number(),
  roles: z.array(z.object({ role, studio: z.object({ uid, name: z.string() }).nullable() })),
  /** True where the person may do it somewhere in the network. */
  abilities,
  /** Studios whose firings the person may read. */
  studios: z.array(sessionStudio),
})
export type SessionNetwork = z.infer<typeof sessionNetwork>

export const demoAccount = z.object({
  label: z.string(),
  email: z.string(),
  password: z.string(),
  network: z.string(),
})

/** GET /api/session, and the answer of POST and DELETE. */
export const sessionOutput = z.object({
  user: z.object({ uid, name: z.string(), email: z.string(), preferences }).nullable(),
  networks: z.array(sessionNetwork),
  /** Accounts to try, listed in demo mode only. */
  demo: z.array(demoAccount),
  version: z.string(),
})
export type Session = z.infer<typeof sessionOutput>

/** POST /api/session */
export const signInInput = z.object({
  email: z.string().trim().min(1, 'Enter your e-mail address.').max(254),
  password: z.string().min(1, 'Enter your password.').max(1000),
})

const newPassword = z
  .string()
  .min(12, 'At least 12 characters: a few words are fine.')
  .max(200, 'At most 200 characters.')

/** GET /api/links/:token; `networkName` is null where the link is for a password alone */
export const linkOutput = z.object({
  name: z.string(),
  email: z.string(),
  networkName: z.string().nullable(),
})
/** POST /api/links/:token: answers the session, signed in */
export const useLinkInput = z.object({ password: newPassword })

/** PATCH /api/account: answers the session */
export const accountInput = z.object({
  name: z.string().trim().min(1, 'Enter your name.').max(120),
  preferences,
})
/** PUT /api/account/password: this session stays, all others end */
export const changePasswordInput = z.object({
  current: z.string().min(1, 'Enter your present password.').max(1000),
  password: newPassword,
})
