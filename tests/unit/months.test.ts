import { describe, expect, it } from 'vitest'
import { addMonths, daysOfMonth, monthsFrom } from '../../server/shared/months.js'
import { missingFirings } from '../../server/shared/missingFirings.js'

describe('months', () => {
  it('run over the end of a year both ways', () => {
    expect(addMonths('2025-12', 1)).toBe('2026-01')
    expect(addMonths('2026-01', -13)).toBe('2024-12')
    expect(monthsFrom('2025-11', '2026-02')).toEqual(['2025-11', '2025-12', '2026-01', '2026-02'])
    expect(monthsFrom('2026-02', '2026-01')).toEqual([])
  })

  it('end on their last day, leap years too', () => {
    expect(daysOfMonth('2024-02')).toEqual({ first: '2024-02-01', last: '2024-02-29' })
    expect(daysOfMonth('2025-02').last).toBe('2025-02-28')
  })
})

describe('missing firings', () => {
  it('are the numbers of the counter less the firings that are here', () => {
    expect(missingFirings({ lowest: 3, highest: 10 }, 4)).toBe(4)
    expect(missingFirings({ lowest: 3, highest: 10 }, 12)).toBe(0)
    expect(missingFirings({ lowest: null, highest: null }, 4)).toBe(0)
  })
})
