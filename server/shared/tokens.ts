/**
 * Colours, type and spacing of the whole product: screen, mail and print read them from here.
 * Every text colour has at least 4.5:1 on ground and raised, line and control colours at least 3:1;
 * tests/unit/tokens.test.ts computes it. The fills of outcomes differ in lightness, so that they
 * are told apart under the three dichromacies too; their shapes are in wareBoard.ts.
 */
export interface Palette {
  /** Page. */
  ground: string
  /** Sheets and inputs. */
  raised: string
  /** Selected things, sound cells. */
  wash: string
  /** Hairlines; carries no meaning, so it may be faint. */
  rule: string
  ink: string
  ink2: string
  /** Action, links, lines of charts. */
  cobalt: string
  /** Headings, pressed. */
  cobaltDeep: string
  /** Second series of a chart, outlines of sound cells: cobalt thinned to 3:1. */
  cobaltSoft: string
  /** Text on cobalt. */
  onCobalt: string
  /** The one green: done, saved, arrived, improvement. */
  celadon: string
  /** Words about seconds. */
  ochre: string
  /** Words about refires. */
  rust: string
  /** Words about wasters and errors. */
  iron: string
  fillSecond: string
  fillRefire: string
  fillWaster: string
  /** The crack across a waster. */
  crack: string
}

export const LIGHT: Readonly<Palette> = {
  ground: '#F6F8FA',
  raised: '#FFFFFF',
  wash: '#E4ECF7',
  rule: '#C9D5E6',
  ink: '#16202E',
  ink2: '#4A5768',
  cobalt: '#1C4B9C',
  cobaltDeep: '#12346F',
  cobaltSoft: '#6F8CBF',
  onCobalt: '#FFFFFF',
  celadon: '#2F7D66',
  ochre: '#946000',
  rust: '#B4500F',
  iron: '#A5231B',
  fillSecond: '#EFC46A',
  fillRefire: '#D9772B',
  fillWaster: '#9E1B1B',
  crack: '#FFFFFF',
}

export const DARK: Readonly<Palette> = {
  ground: '#0D1522',
  raised: '#141F30',
  wash: '#1B2B45',
  rule: '#2B3B54',
  ink: '#E9EFF7',
  ink2: '#A9B7CA',
  cobalt: '#8FB4F2',
  cobaltDeep: '#B9D0F8',
  cobaltSoft: '#5F7BA9',
  onCobalt: '#0D1522',
  celadon: '#74C3A8',
  ochre: '#E0B04A',
  rust: '#EE9557',
  iron: '#FF8A7E',
  fillSecond: '#7D5F1E',
  fillRefire: '#CE7330',
  fillWaster: '#FF8A7E',
  crack: '#0D1522',
}

export type ThemeName = 'light' | 'dark'
export const PALETTES: Readonly<Record<ThemeName, Readonly<Palette>>> = { light: LIGHT, dark: DARK }

/** Sizes of type in px; nothing between them. */
export const TYPE_SCALE = [12, 14, 16, 20, 28, 40] as const
/** All distances are multiples of it, in px. */
export const SPACE = 4
/** Corner radius, px. */
export const CORNER = 2
/** Smallest touch target at the desk and at the kiln, px. */
export const TARGET = { desk: 44, kiln: 48 } as const
/** Widest content and longest line of prose. */
export const CONTENT_WIDTH = 1200
export const PROSE_WIDTH = '70ch'
export const FONT_FAMILY = "'Open Sans', 'Segoe UI', system-ui, sans-serif"

/** Name of a colour as a CSS custom property: `cobaltDeep` is `--cobalt-deep`, `ink2` is `--ink-2`. */
export function cssName(key: string): string {
  return `--${key.replace(/[A-Z]/g, (letter) => `-${letter.toLowerCase()}`).replace(/(\D)(\d)/g, '$1-$2')}`
}

/** WCAG 2.2 contrast of two `#RRGGBB` colours, 1 to 21. */
export function contrast(a: string, b: string): number {
  const [low, high] = [luminance(a), luminance(b)].sort((x, y) => x - y) as [number, number]
  return (high + 0.05) / (low + 0.05)
}

/** Relative luminance (WCAG 2.2 definition), 0 to 1. */
function luminance(colour: string): number {
  const [r, g, b] = [1, 3, 5].map((at) => {
    const channel = Number.parseInt(colour.slice(at, at + 2), 16) / 255
    return channel <= 0.04045 ? channel / 12.92 : ((channel + 0.055) / 1.055) ** 2.4
  }) as [number, number, number]
  return 0.2126 * r + 0.7152 * g + 0.0722 * b
}
