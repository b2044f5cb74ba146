import { ref } from 'vue'
import type { PackDraft } from './packDraft'
import { chosen } from './packDraft'

/** Remembered of each list. */
const MOST = 6

/** What this person chose lately in this network, newest first, by list (factor, `kiln`, `kind`): offered first next time. */
export function useRecentChoices(user: string, network: string) {
  const key = `duntless.recent.${user}.${network}`
  const lists = ref<Record<string, string[]>>(read(key))

  /** Those chosen lately first, the others in their order. */
  function recentFirst<T extends { uid: string }>(list: string, items: readonly T[]): T[] {
    const rank = (item: T): number => {
      const at = lists.value[list]?.indexOf(item.uid) ?? -1
      return at === -1 ? MOST : at
    }
    return [...items].sort((a, b) => rank(a) - rank(b))
  }

  function remember(draft: PackDraft): void {
    const next = { ...lists.value }
    const add = (list: string, values: readonly (string | null)[]): void => {
      const known = values.filter((value) => value !== null)
      if (known.length > 0)
        next[list] = [...new Set([...known, ...(next[list] ?? [])])].slice(0, MOST)
    }
    add('kiln', [draft.kiln])
    add('kind', [draft.kind])
    for (const lot of draft.lots)
      for (const factor of Object.keys(lot.levels)) add(factor, chosen(lot, factor))
    lists.value = next
    try {
      localStorage.setItem(key, JSON.stringify(next))
    } catch {
      // A convenience: without storage the lists stand in their own order.
    }
  }

  return { lists, recentFirst, remember }
}

function read(key: string): Record<string, string[]> {
  try {
    const stored: unknown = JSON.parse(localStorage.getItem(key) ?? '{}')
    return stored !== null && typeof stored === 'object' ? (stored as Record<string, string[]>) : {}
  } catch {
    return {}
  }
}
