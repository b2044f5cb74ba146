import { computed, onScopeDispose, ref } from 'vue'
import type { ThemeName } from '../../server/shared/tokens.js'
import { usePreferencesStore } from '../stores/preferences'
import type { Theme } from '../stores/preferences'

/** The theme chosen, and the one that is shown: what a chart needs to know. */
export function useTheme() {
  const preferences = usePreferencesStore()
  const system = window.matchMedia('(prefers-color-scheme: dark)')
  const systemDark = ref(system.matches)
  const follow = (event: MediaQueryListEvent): void => {
    systemDark.value = event.matches
  }
  system.addEventListener('change', follow)
  onScopeDispose(() => system.removeEventListener('change', follow))

  return {
    theme: computed<Theme>({
      get: () => preferences.theme,
      set: (next) => preferences.setTheme(next),
    }),
    shown: computed<ThemeName>(() =>
      preferences.theme === 'system' ? (systemDark.value ? 'dark' : 'light') : preferences.theme,
    ),
  }
}
