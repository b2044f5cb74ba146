import { describe, expect, it } from 'vitest'
import { formatCount, plural } from '../../server/shared/plural.js'

describe('plural', () => {
  it.each([
    [0, '0 pieces'],
    [1, '1 piece'],
    [2, '2 pieces'],
    [17_806, '17,806 pieces'],
  ])('puts %i pieces as "%s"', (n, words) => {
    expect(plural(n, 'piece')).toBe(words)
  })

  it('takes an irregular plural', () => {
    expect(plural(3, 'loss', 'losses')).toBe('3 losses')
  })
})

describe('formatCount', () => {
  it('separates thousands', () => {
    expect(formatCount(1318)).toBe('1,318')
  })
})
