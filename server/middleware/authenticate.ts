import type { Request, RequestHandler, Response } from 'express'
import { Passport } from 'passport'
import type { PassportStatic } from 'passport'
import { Strategy as LocalStrategy } from 'passport-local'
import { findUserForSession } from '../queries/userForSession.js'

/** The person as the session knows them. */
export interface SignedInUser {
  id: number
  uid: string
  name: string
  email: string
  preferences: Record<string, unknown>
  /** Sessions made before the last "sign out everywhere" carry an older number. */
  sessionEpoch: number
}

type Verify = (email: string, password: string, req: Request) => Promise<SignedInUser>

/**
 * passport-local on server sessions. The session holds the person's id and epoch; a session of an
 * older epoch is nobody's. `verify` throws an AppError for a wrong guess or too many of them.
 */
export function createAuthentication(verify: Verify): {
  session: RequestHandler
  signIn: (req: Request, res: Response) => Promise<SignedInUser>
} {
  const passport = new Passport() as unknown as PassportStatic
  passport.serializeUser((user, done) => done(null, `${user.id}:${user.sessionEpoch}`))
  passport.deserializeUser((key: string, done) => {
    const [id, epoch] = key.split(':').map(Number)
    findUserForSession(id ?? 0).then(
      (user) => done(null, user && user.sessionEpoch === epoch ? user : false),
      (error: unknown) => done(error),
    )
  })
  passport.use(
    new LocalStrategy(
      { usernameField: 'email', passReqToCallback: true },
      (req, email, password, done) => {
        verify(email, password, req).then(
          (user) => done(null, user),
          (error: unknown) => done(error),
        )
      },
    ),
  )
  return {
    session: passport.session() as RequestHandler,
    /** Checks the body's e-mail and password; on success the session gets a new id. */
    signIn: (req, res) =>
      new Promise<SignedInUser>((resolve, reject) => {
        const authenticate = passport.authenticate(
          'local',
          (error: Error | null, user: SignedInUser | false) => {
            if (error) return reject(error)
            if (!user) return reject(new Error('passport-local gave no user'))
            req.logIn(user, (failed?: Error | null) => (failed ? reject(failed) : resolve(user)))
          },
        ) as RequestHandler
        void authenticate(req, res, (error?: unknown) => {
          reject(error instanceof Error ? error : new Error('passport gave no answer'))
        })
      }),
  }
}
