import { defineStore } from 'pinia'
import { ref } from 'vue'
import type { Preferences } from '../../server/contract/session.js'

export type Theme = Preferences['theme']

/** Read by public/theme.js before the first paint. */
const THEME_KEY = 'duntless.theme'

function storedTheme(): Theme {
  try {
    const stored = localStorage.getItem(THEME_KEY)
    return stored === 'light' || stored === 'dark' ? stored : 'system'
  } catch {
    return 'system'
  }
}

/** The person's own choices, kept on this device so that they hold before signing in too. */
export const usePreferencesStore = defineStore('preferences', () => {
  const theme = ref<Theme>(storedTheme())
  const temperatureUnit = ref<'C' | 'F' | null>(null)
  const lengthUnit = ref<'mm' | 'in' | null>(null)

  function setTheme(next: Theme): void {
    theme.value = next
    const root = document.documentElement
    if (next === 'system') delete root.dataset.theme
    else root.dataset.theme = next
    try {
      if (next === 'system') localStorage.removeItem(THEME_KEY)
      else localStorage.setItem(THEME_KEY, next)
    } catch {
      // Storage may be forbidden: the choice then lasts as long as the page.
    }
  }

  /** Takes over what the account says. */
  function adopt(preferences: Preferences): void {
    setTheme(preferences.theme)
    temperatureUnit.value = preferences.temperatureUnit
    lengthUnit.value = preferences.lengthUnit
  }

  /** Units go with the person; the theme stays with the device. */
  function reset(): void {
    temperatureUnit.value = null
    lengthUnit.value = null
  }

  return { theme, temperatureUnit, lengthUnit, setTheme, adopt, reset }
})
