import { defineStore } from 'pinia'
import { computed, ref, shallowRef } from 'vue'
import type { Ability } from '../../server/contract/roles.js'
import type { Session, SessionNetwork } from '../../server/contract/session.js'
import { getSession } from '../api/session'

/** Who is signed in, and what they may do in which network. The server decides; this only remembers its answer. */
export const useSessionStore = defineStore('session', () => {
  const session = shallowRef<Session | null>(null)
  /** The session ended while a page was open: the sign-in page says so. */
  const expired = ref(false)
  let loading: Promise<Session> | null = null

  const user = computed(() => session.value?.user ?? null)
  const networks = computed(() => session.value?.networks ?? [])

  function set(next: Session): void {
    session.value = next
    if (next.user) expired.value = false
  }

  /** The session, asked for once; two callers share one request, and a failed one may be tried again. */
  async function load(): Promise<Session> {
    if (session.value) return session.value
    loading ??= getSession()
    try {
      set(await loading)
      return await loading
    } finally {
      loading = null
    }
  }

  function network(slug: string): SessionNetwork | null {
    return networks.value.find((each) => each.slug === slug) ?? null
  }

  /** May this person do it somewhere in the network? Whether with one thing is in that thing's own `abilities`. */
  function can(slug: string, ability: Ability): boolean {
    return network(slug)?.abilities[ability] === true
  }

  function expire(): void {
    expired.value = user.value !== null
    if (session.value) session.value = { ...session.value, user: null, networks: [] }
  }

  function reset(): void {
    session.value = null
    expired.value = false
  }

  return { session, user, networks, expired, set, load, network, can, expire, reset }
})
