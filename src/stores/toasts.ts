import { defineStore } from 'pinia'
import { ref } from 'vue'

export interface Toast {
  id: number
  text: string
  tone: 'done' | 'problem'
  /** One thing that can be done about it, such as Undo. */
  action: { label: string; run: () => unknown } | null
}

/** What was said, and since when each is up. Long enough to reach Undo; a problem stays until it is put away. */
const SHOWN_MS = 8000

/** Short notices at the edge of the page. */
export const useToastsStore = defineStore('toasts', () => {
  const toasts = ref<Toast[]>([])
  const timers = new Map<number, ReturnType<typeof setTimeout>>()
  let last = 0

  function add(toast: Omit<Toast, 'id'>): void {
    last += 1
    const id = last
    toasts.value = [...toasts.value.slice(-2), { ...toast, id }]
    if (toast.tone === 'done') start(id)
  }

  function start(id: number): void {
    hold(id)
    timers.set(
      id,
      setTimeout(() => dismiss(id), SHOWN_MS),
    )
  }

  /** Stops the clock of a notice that is being read or reached for. */
  function hold(id: number): void {
    clearTimeout(timers.get(id))
    timers.delete(id)
  }

  function dismiss(id: number): void {
    hold(id)
    toasts.value = toasts.value.filter((toast) => toast.id !== id)
  }

  function reset(): void {
    for (const { id } of toasts.value) dismiss(id)
  }

  return { toasts, add, start, hold, dismiss, reset }
})
