import { computed, ref } from 'vue'
import type { Option } from './types'

/** Letters as compared: without case and accents, so that "cafe" finds "Café". */
export function fold(text: string): string {
  return text.normalize('NFD').replace(/\p{M}/gu, '').toLowerCase().trim()
}

/** Options that hold what was typed, for QSelect's filter event; those that begin with it come first. */
export function useNarrowing(options: () => readonly Option[]) {
  const wanted = ref('')
  const shown = computed(() => {
    const part = fold(wanted.value)
    if (!part) return [...options()]
    const found = options().filter((option) => fold(option.label).includes(part))
    return found.sort(
      (a, b) => Number(!fold(a.label).startsWith(part)) - Number(!fold(b.label).startsWith(part)),
    )
  })

  function narrow(text: string, update: (change: () => void) => void): void {
    update(() => (wanted.value = text))
  }

  return { shown, narrow }
}
