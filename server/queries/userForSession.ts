import { User } from '../models/index.js'

/** The person of a session, or null when the account is gone. */
export async function findUserForSession(id: number) {
  const user = await User.findByPk(id)
  if (!user) return null
  return {
    id: user.id,
    uid: user.uid,
    name: user.name,
    email: user.email,
    preferences: user.preferences,
    sessionEpoch: user.sessionEpoch,
  }
}
