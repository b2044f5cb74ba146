import { computed } from 'vue'
import type { ComputedRef } from 'vue'
import { useRoute } from 'vue-router'
import type { Ability } from '../../server/contract/roles.js'
import { useSessionStore } from '../stores/session'

/** The network in the address; the last one while the person is on the way to a page without. */
export function useNetworkSlug(): ComputedRef<string> {
  const route = useRoute()
  return computed<string>((before) =>
    typeof route.params.network === 'string' ? route.params.network : (before ?? ''),
  )
}

/** The network in the address with the person's studios and abilities. */
export function useNetwork() {
  const slug = useNetworkSlug()
  const session = useSessionStore()
  return computed(() => session.network(slug.value))
}

/** What the person may do somewhere in this network; whether with one thing is in that thing's own `abilities`. */
export function useAbilities() {
  const slug = useNetworkSlug()
  const session = useSessionStore()
  return { can: (ability: Ability): boolean => session.can(slug.value, ability) }
}
