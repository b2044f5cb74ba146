import { computed } from 'vue'
import type { ComputedRef } from 'vue'
import type { Choice } from './choice'

/** Months as YYYY-MM, first and last; both missing: the last twelve. */
export interface Months {
  from?: string | undefined
  to?: string | undefined
}

const SPANS = [3, 6, 12, 18, 24]
const YEARS = 3

/** A month some months before another. */
export function monthsBefore(month: string, n: number): string {
  const [year = 0, index = 1] = month.split('-').map(Number)
  const at = year * 12 + index - 1 - n
  return `${Math.floor(at / 12)}-${String((at % 12) + 1).padStart(2, '0')}`
}

/** The month of today in a zone, YYYY-MM. */
export function monthNow(timeZone: string): string {
  const parts = new Intl.DateTimeFormat('en-CA', { timeZone, year: 'numeric', month: '2-digit' })
  return parts.format(new Date()).slice(0, 7)
}

/**
 * The word for a span of months in the shelf sentence: "last 12 months", "2025", or the months
 * themselves where the address names others.
 */
export function usePeriod(months: ComputedRef<Months>, timeZone: () => string) {
  const now = computed(() => monthNow(timeZone()))
  const options = computed<Choice[]>(() => {
    const year = Number(now.value.slice(0, 4))
    const spans = SPANS.map((n) => ({
      value: n === 12 ? '' : `${monthsBefore(now.value, n - 1)}..${now.value}`,
      label: `last ${n} months`,
    }))
    const years = Array.from({ length: YEARS }, (_, back) => ({
      value: `${year - back}-01..${year - back}-12`,
      label: String(year - back),
    }))
    return [...spans.filter(({ value }) => value !== ''), ...years]
  })
  const value = computed(() => {
    const { from, to } = months.value
    return from || to ? `${from ?? ''}..${to ?? now.value}` : undefined
  })
  /** The months of a chosen word. */
  function monthsOf(word: string | undefined): Months {
    const [from, to] = word?.split('..') ?? []
    return { from: from || undefined, to: to || undefined }
  }
  return { options, value, monthsOf, allLabel: 'last 12 months' }
}
