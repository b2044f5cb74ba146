import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { contrast, cssName, PALETTES } from '../../server/shared/tokens.js'
import { tokensCss } from '../../src/assets/makeTokens.js'

describe('contrast', () => {
  it('is 21 for black on white and 1 for a colour on itself (WCAG 2.2)', () => {
    expect(contrast('#000000', '#FFFFFF')).toBeCloseTo(21, 6)
    expect(contrast('#1C4B9C', '#1C4B9C')).toBe(1)
  })

  it('is 4.54 for #767676 on white, the well-known lightest grey that passes', () => {
    expect(contrast('#767676', '#FFFFFF')).toBeCloseTo(4.54, 2)
  })
})

describe.each(['light', 'dark'] as const)('the %s palette', (theme) => {
  const palette = PALETTES[theme]

  it.each(['ink', 'ink2', 'cobalt', 'cobaltDeep', 'celadon', 'ochre', 'rust', 'iron'] as const)(
    'has %s readable on ground and raised',
    (name) => {
      expect(contrast(palette[name], palette.ground)).toBeGreaterThanOrEqual(4.5)
      expect(contrast(palette[name], palette.raised)).toBeGreaterThanOrEqual(4.5)
    },
  )

  it('has readable text on cobalt', () => {
    expect(contrast(palette.onCobalt, palette.cobalt)).toBeGreaterThanOrEqual(4.5)
    expect(contrast(palette.onCobalt, palette.cobaltDeep)).toBeGreaterThanOrEqual(4.5)
  })

  it('has outlines of cells and controls that stand out 3:1', () => {
    expect(contrast(palette.cobaltSoft, palette.ground)).toBeGreaterThanOrEqual(3)
    expect(contrast(palette.cobalt, palette.raised)).toBeGreaterThanOrEqual(3)
  })

  it('has a crack that is seen on the waster', () => {
    expect(contrast(palette.crack, palette.fillWaster)).toBeGreaterThanOrEqual(4.5)
  })

  it('tells the fills of outcomes apart by lightness', () => {
    const fills = [palette.fillSecond, palette.fillRefire, palette.fillWaster]
    for (const [i, a] of fills.entries())
      for (const b of fills.slice(i + 1)) expect(contrast(a, b)).toBeGreaterThanOrEqual(1.4)
  })
})

describe('tokens.css', () => {
  it('is what the tokens make', () => {
    expect(readFileSync('src/assets/tokens.css', 'utf8')).toBe(tokensCss())
  })
})

describe('cssName', () => {
  it('writes camel case with dashes, digits apart', () => {
    expect(cssName('fillWaster')).toBe('--fill-waster')
    expect(cssName('ink2')).toBe('--ink-2')
  })
})
