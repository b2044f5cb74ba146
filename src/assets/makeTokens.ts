/**
 * Text of tokens.css, made from server/shared/tokens.ts. After a change of tokens, at the top folder:
 * `npx tsx -e "import('./src/assets/makeTokens.ts').then((m) => process.stdout.write(m.tokensCss()))" > src/assets/tokens.css`
 * A unit test compares the two.
 */
import {
  CONTENT_WIDTH,
  CORNER,
  cssName,
  DARK,
  FONT_FAMILY,
  LIGHT,
  PROSE_WIDTH,
  SPACE,
  TARGET,
  TYPE_SCALE,
} from '../../server/shared/tokens.js'
import type { Palette } from '../../server/shared/tokens.js'

/** The stylesheet with both themes: the system's, unless `data-theme` on <html> says otherwise. */
export function tokensCss(): string {
  const sizes = TYPE_SCALE.map((size) => `  --text-${size}: ${size / 16}rem;`)
  const spaces = [1, 2, 3, 4, 5, 6, 8, 10, 12, 16].map((n) => `  --space-${n}: ${n * SPACE}px;`)
  const fixed = [
    `  --font: ${FONT_FAMILY};`,
    `  --corner: ${CORNER}px;`,
    `  --target: ${TARGET.desk}px;`,
    `  --target-kiln: ${TARGET.kiln}px;`,
    `  --content: ${CONTENT_WIDTH}px;`,
    `  --prose: ${PROSE_WIDTH};`,
  ]
  return [
    '/* Made by makeTokens.ts from server/shared/tokens.ts. Change it there. */',
    ':root {',
    ...fixed,
    ...sizes,
    ...spaces,
    ...colours('light', LIGHT, '  '),
    '}',
    '@media (prefers-color-scheme: dark) {',
    "  :root:not([data-theme='light']) {",
    ...colours('dark', DARK, '    '),
    '  }',
    '}',
    ":root[data-theme='dark'] {",
    ...colours('dark', DARK, '  '),
    '}',
    '',
  ].join('\n')
}

function colours(scheme: string, palette: Readonly<Palette>, indent: string): string[] {
  const lines = Object.entries(palette).map(
    ([key, colour]) => `${indent}${cssName(key)}: ${colour.toLowerCase()};`,
  )
  return [`${indent}color-scheme: ${scheme};`, ...lines]
}
