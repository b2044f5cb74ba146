import { hash, verify } from '@node-rs/argon2'
import type { Deps } from '../deps.js'

/** Hashes a password for `users.password_hash` with argon2id (the package's default); the cost is in the hash. */
export function hashPassword(password: string, { config }: Pick<Deps, 'config'>): Promise<string> {
  return hash(password, config.passwordCost)
}

const dummies = new Map<string, Promise<string>>()

/** A hash that nothing matches, made once per cost. */
function dummyHash(deps: Pick<Deps, 'config'>): Promise<string> {
  const key = JSON.stringify(deps.config.passwordCost)
  const known = dummies.get(key) ?? hashPassword('nobody has this password', deps)
  dummies.set(key, known)
  return known
}

/**
 * Is it the password of this hash? Without a hash (unknown account, or no password set yet) a dummy
 * is checked, so that the time taken does not tell which accounts exist.
 */
export async function passwordMatches(
  password: string,
  passwordHash: string | null,
  deps: Pick<Deps, 'config'>,
): Promise<boolean> {
  const matches = await verify(passwordHash ?? (await dummyHash(deps)), password)
  return matches && passwordHash !== null
}
