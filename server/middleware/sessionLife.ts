import type { Request, Response } from 'express'

/** The name of the session's cookie. */
export const SESSION_COOKIE = 'sid'

/** Ends this session: its row goes, and the browser is told to forget the cookie. */
export function endSession(req: Request, res: Response): Promise<void> {
  res.clearCookie(SESSION_COOKIE, { httpOnly: true, sameSite: 'lax', path: '/' })
  return new Promise((resolve, reject) => {
    req.session.destroy((error?: Error | null) => (error ? reject(error) : resolve()))
  })
}

/** Makes this person the one of the session, which gets a new id: an id known before is worth nothing. */
export function startSession(req: Request, user: Express.User): Promise<void> {
  return new Promise((resolve, reject) => {
    req.logIn(user, (error?: Error | null) => (error ? reject(error) : resolve()))
  })
}
