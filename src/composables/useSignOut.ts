import { useQueryClient } from '@tanstack/vue-query'
import { useRouter } from 'vue-router'
import { signOut } from '../api/session'
import { usePreferencesStore } from '../stores/preferences'
import { useSessionStore } from '../stores/session'
import { useToast } from './useToast'

/** Ends the session and leaves nothing of it on the device. */
export function useSignOut() {
  const session = useSessionStore()
  const preferences = usePreferencesStore()
  const queries = useQueryClient()
  const router = useRouter()
  const toast = useToast()

  async function leave(): Promise<void> {
    try {
      const after = await signOut()
      session.reset()
      session.set(after)
      preferences.reset()
      await router.push({ name: 'sign-in' })
      queries.clear()
    } catch (error) {
      toast.fail(error)
    }
  }

  return { leave }
}
