import { queryOptions } from '@tanstack/vue-query'
import type { z } from 'zod'
import { nothing } from '../../server/contract/common.js'
import { fill, PATHS } from '../../server/contract/paths.js'
import { linkOutput, sessionOutput } from '../../server/contract/session.js'
import type {
  accountInput,
  changePasswordInput,
  Session,
  signInInput,
  useLinkInput,
} from '../../server/contract/session.js'
import { getJson, sendJson } from './http'

/** Who is signed in here, and where they may go. */
export function getSession(): Promise<Session> {
  return getJson(PATHS.session, { schema: sessionOutput })
}

/** A wrong address or password is an ApiError with fields, not a way to the sign-in page. */
export function signIn(body: z.input<typeof signInInput>): Promise<Session> {
  return sendJson(PATHS.session, { method: 'POST', body, schema: sessionOutput, quiet401: true })
}

export function signOut(): Promise<Session> {
  return sendJson(PATHS.session, { method: 'DELETE', schema: sessionOutput, quiet401: true })
}

/** Ends every session of this person, on all devices. */
export async function signOutEverywhere(): Promise<void> {
  await sendJson(PATHS.sessions, { method: 'DELETE', schema: nothing, quiet401: true })
}

/** Whom a one-time link is for. */
export function linkQuery(token: string) {
  return queryOptions({
    queryKey: ['link', token],
    queryFn: ({ signal }) => getJson(fill(PATHS.link, { token }), { schema: linkOutput, signal }),
    retry: false,
    staleTime: Infinity,
  })
}

/** Sets the password that a one-time link is for, and signs in. */
export function useLink(token: string, body: z.input<typeof useLinkInput>): Promise<Session> {
  return sendJson(fill(PATHS.link, { token }), {
    method: 'POST',
    body,
    schema: sessionOutput,
    quiet401: true,
  })
}

export function saveAccount(body: z.input<typeof accountInput>): Promise<Session> {
  return sendJson(PATHS.account, { method: 'PATCH', body, schema: sessionOutput })
}

export async function changePassword(body: z.input<typeof changePasswordInput>): Promise<void> {
  await sendJson(PATHS.accountPassword, { method: 'PUT', body, schema: nothing })
}
