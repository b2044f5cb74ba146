import type { RouteLocationNormalized, RouteLocationRaw, Router } from 'vue-router'
import { useSessionStore } from '../stores/session'

/** The only redirects of the client: who is not signed in signs in first, and comes back. */
export function installGuards(router: Router): void {
  router.beforeEach(async (to) => {
    const session = useSessionStore()
    // Public pages are shown even when the server is away; the page then says so itself.
    if (to.meta.public) {
      await session.load().catch(() => undefined)
      return to.name === 'sign-in' && session.user ? home(to) : true
    }
    await session.load()
    if (!session.user) return signInFirst(to)
    if (to.name === 'home') return home(to)
    const slug = to.params.network
    // A network that is not the person's is, for them, one that does not exist.
    if (typeof slug === 'string' && !session.network(slug)) return missing(to)
    return true
  })
}

/** Where a signed-in person begins: where they were going, else today of their first network. */
function home(to: RouteLocationNormalized): RouteLocationRaw {
  const session = useSessionStore()
  const next = to.query.next
  if (
    typeof next === 'string' &&
    next.startsWith('/') &&
    !next.startsWith('//') &&
    !next.startsWith('/sign-in')
  )
    return next
  const network = session.networks[0]
  return network ? { name: 'today', params: { network: network.slug } } : { name: 'account' }
}

function signInFirst(to: RouteLocationNormalized): RouteLocationRaw {
  return { name: 'sign-in', query: to.name === 'home' ? {} : { next: to.fullPath } }
}

function missing(to: RouteLocationNormalized): RouteLocationRaw {
  return {
    name: 'not-found',
    params: { anything: to.path.slice(1).split('/') },
    query: to.query,
    replace: true,
  }
}
