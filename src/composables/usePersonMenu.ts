import { computed } from 'vue'
import { useRouter } from 'vue-router'
import type { RouteLocationRaw } from 'vue-router'
import { saveAccount } from '../api/session'
import { usePreferencesStore } from '../stores/preferences'
import type { Theme } from '../stores/preferences'
import { useSessionStore } from '../stores/session'
import { useSignOut } from './useSignOut'
import { useToast } from './useToast'

interface Entry {
  label: string
  to?: RouteLocationRaw
  run?: () => unknown
  note?: string
  checked?: boolean
}

const THEMES: readonly { theme: Theme; label: string }[] = [
  { theme: 'system', label: 'Colours of the device' },
  { theme: 'light', label: 'Light' },
  { theme: 'dark', label: 'Dark' },
]

/** Words under the person's name: account, theme, sign out. */
export function usePersonMenu() {
  const session = useSessionStore()
  const preferences = usePreferencesStore()
  const router = useRouter()
  const toast = useToast()
  const { leave } = useSignOut()

  /** Shown at once; the account follows, so that other devices have it too. */
  async function choose(theme: Theme): Promise<void> {
    preferences.setTheme(theme)
    const { user } = session
    if (!user) return
    try {
      session.set(
        await saveAccount({ name: user.name, preferences: { ...user.preferences, theme } }),
      )
    } catch (error) {
      toast.fail(error)
    }
  }

  return computed<Entry[]>(() => [
    { label: 'Account', to: router.resolve({ name: 'account' }).fullPath },
    ...THEMES.map(({ theme, label }) => ({
      label,
      checked: preferences.theme === theme,
      run: () => choose(theme),
    })),
    { label: 'Sign out', run: leave },
  ])
}
