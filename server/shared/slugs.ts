/** First parts of addresses that are the product's own: no network can have one as its short name. */
export const RESERVED_SLUGS: readonly string[] = [
  'account',
  'api',
  'assets',
  'guide',
  'healthz',
  'invite',
  'readyz',
  'reset',
  'set-up',
  'sign-in',
  'unsubscribe',
]

/** What is wrong with a network's short name, or null: it is the first part of all its addresses. */
export function slugProblem(slug: string): string | null {
  if (!/^[a-z0-9]([a-z0-9-]{0,58}[a-z0-9])?$/.test(slug)) {
    return 'use small letters, digits and hyphens between them, at most 60, like clay-ring'
  }
  return RESERVED_SLUGS.includes(slug) ? `"${slug}" is an address of the product itself` : null
}
