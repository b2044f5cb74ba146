import { computed, ref } from 'vue'
import type { ComputedRef, Ref } from 'vue'

/** Steps of the keys in a grid of so many columns; undefined for other keys. */
export function stepOf(key: string, columns: number): number | undefined {
  return {
    ArrowRight: 1,
    ArrowLeft: -1,
    ArrowDown: columns,
    ArrowUp: -columns,
    Home: -Infinity,
    End: Infinity,
  }[key]
}

/**
 * One tab stop for a grid of buttons; arrows, Home and End move inside it. `columns` is asked at each
 * key, since a board wraps as wide as its screen; `focus` puts the focus on a cell.
 */
export function useRovingGrid(
  count: ComputedRef<number>,
  columns: () => number,
  focus: (index: number) => void,
): {
  current: Ref<number>
  tabIndex: (index: number) => 0 | -1
  onKeydown: (event: KeyboardEvent) => void
} {
  const chosen = ref(0)
  const current = computed({
    get: () => Math.min(chosen.value, Math.max(0, count.value - 1)),
    set: (index: number) => (chosen.value = index),
  })

  function onKeydown(event: KeyboardEvent): void {
    const step =
      event.altKey || event.ctrlKey || event.metaKey ? undefined : stepOf(event.key, columns())
    if (step === undefined) return
    event.preventDefault()
    const next = Math.min(count.value - 1, Math.max(0, current.value + step))
    // Up and down stop at the edge instead of sliding along it.
    if (Number.isFinite(step) && Math.abs(step) > 1 && next !== current.value + step) return
    current.value = next
    focus(next)
  }

  return { current, tabIndex: (index) => (index === current.value ? 0 : -1), onKeydown }
}
