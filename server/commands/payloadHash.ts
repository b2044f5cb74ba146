import { createHash } from 'node:crypto'

/** JSON with the keys of every object in order, so that equal values are equal texts. */
function canonical(value: unknown): unknown {
  if (Array.isArray(value)) return value.map(canonical)
  if (typeof value !== 'object' || value === null) return value
  return Object.fromEntries(
    Object.entries(value)
      .filter(([, each]) => each !== undefined)
      .sort(([a], [b]) => (a < b ? -1 : 1))
      .map(([key, each]) => [key, canonical(each)]),
  )
}

/** SHA-256 of a payload in hex, the same for the same values in any order of keys: tells a repeat from another body. */
export function payloadHash(payload: unknown): string {
  return createHash('sha256')
    .update(JSON.stringify(canonical(payload)))
    .digest('hex')
}
