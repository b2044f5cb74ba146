import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { usePreferencesStore } from '../../../src/stores/preferences'
import { useToastsStore } from '../../../src/stores/toasts'
import {
  formatDay,
  formatMoment,
  formatMonth,
  formatPercent,
} from '../../../src/composables/useUnits'

describe('toasts', () => {
  beforeEach(() => vi.useFakeTimers())
  afterEach(() => vi.useRealTimers())
  const done = { text: 'Saved.', tone: 'done' as const, action: null }

  it('go by themselves when all is well', () => {
    const toasts = useToastsStore()
    toasts.add(done)
    expect(toasts.toasts).toHaveLength(1)
    vi.advanceTimersByTime(8000)
    expect(toasts.toasts).toHaveLength(0)
  })

  it('stay while they are being read', () => {
    const toasts = useToastsStore()
    toasts.add(done)
    toasts.hold(toasts.toasts[0]?.id ?? 0)
    vi.advanceTimersByTime(60_000)
    expect(toasts.toasts).toHaveLength(1)
  })

  it('stay when something went wrong', () => {
    const toasts = useToastsStore()
    toasts.add({ ...done, tone: 'problem' })
    vi.advanceTimersByTime(60_000)
    expect(toasts.toasts).toHaveLength(1)
  })

  it('are three at most', () => {
    const toasts = useToastsStore()
    for (const text of ['a', 'b', 'c', 'd']) toasts.add({ ...done, text })
    expect(toasts.toasts.map(({ text }) => text)).toEqual(['b', 'c', 'd'])
  })
})

describe('the theme', () => {
  it('is shown at once and kept on the device', () => {
    usePreferencesStore().setTheme('dark')
    expect(document.documentElement.dataset.theme).toBe('dark')
    expect(localStorage.getItem('duntless.theme')).toBe('dark')
  })

  it('follows the device again when nothing is chosen', () => {
    const preferences = usePreferencesStore()
    preferences.setTheme('dark')
    preferences.setTheme('system')
    expect(document.documentElement.dataset.theme).toBeUndefined()
    expect(localStorage.getItem('duntless.theme')).toBeNull()
  })
})

describe('dates and shares', () => {
  it('has no zone in a calendar day', () => {
    expect(formatDay('2026-05-03')).toBe('3 May 2026')
    expect(formatMonth('2026-02', 'short')).toBe('Feb 2026')
  })

  it('shows a moment in the zone of its studio, in summer time too', () => {
    expect(formatMoment('2026-07-01T13:05:00.000Z', 'Europe/Lisbon')).toBe('1 Jul 2026, 14:05')
    expect(formatMoment('2026-01-01T13:05:00.000Z', 'Europe/Lisbon')).toBe('1 Jan 2026, 13:05')
  })

  it('has one decimal in a percentage, and a dash where there is none', () => {
    expect(formatPercent(0.0742)).toBe('7.4 %')
    expect(formatPercent(null)).toBe('–')
  })
})
