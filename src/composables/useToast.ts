import { ApiError } from '../api/http'
import { useToastsStore } from '../stores/toasts'

/** Short notices: what was done (with one way back), or what went wrong. */
export function useToast() {
  const toasts = useToastsStore()
  return {
    /** "Saved." with, for instance, `{ action: { label: 'Undo', run } }`. */
    show(text: string, options: { action?: { label: string; run: () => unknown } } = {}): void {
      toasts.add({ text, tone: 'done', action: options.action ?? null })
    },
    /** An error of a call, in its own words. Anything else is a fault of ours and goes to the error boundary. */
    fail(error: unknown): void {
      if (typeof error !== 'string' && !(error instanceof ApiError)) throw error
      toasts.add({
        text: typeof error === 'string' ? error : error.message,
        tone: 'problem',
        action: null,
      })
    },
  }
}
