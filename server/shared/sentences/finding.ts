/**
 * Findings in words, from codes and numbers alone. A finding says what goes with what, never what
 * causes what. Wording of our own; the meaning of q after Benjamini and Hochberg 1995.
 */
import { factor as factorOf } from '../factors.js'
import { formatCount, plural } from '../plural.js'
import { faultWords } from './faultWords.js'
import type { Stretch } from './firing.js'
import { levelPhrase, pairPhrase } from './levelWords.js'

export type { Stretch }

/** The part of the contract's finding that is put into words. */
export interface FindingInWords {
  fault: string
  factor: string
  level: { name: string }
  pair: { factor: string; level: { name: string } } | null
  comparison: 'within-firing' | 'between-firings'
  /** null: nothing was lost on the other ware. */
  ratio: number | null
  lower: number | null
  upper: number | null
  qValue: number
  exposed: { events: number; units: number }
  unexposed: { events: number; units: number }
  mixedStrata: number
  informativeStrata: number
  /** 0..1 */
  recordedShare: number
}

/** A ratio nearer to 1 than this is said as a percentage. */
const NEARLY_ONE = 1.1
const MOST_IN_WORDS = 1000

/** Stretches as one plain text. */
export function plainText(stretches: readonly Stretch[]): string {
  return stretches.map(({ text }) => text).join('')
}

/** A ratio as a figure: 2.24 is "2.2", 12.6 is "13", 0.43 is "0.43", none at all "0". */
export function ratioFigure(ratio: number): string {
  if (ratio === 0) return '0'
  if (ratio >= 9.95) return formatCount(ratio)
  return ratio >= NEARLY_ONE ? ratio.toFixed(1) : ratio.toFixed(2)
}

/** "2.2 times as often", "twice as often", "8 % more often", "55 % less often". */
export function howOften(ratio: number): string {
  if (ratio < 1) return `${Math.min(99, Math.max(1, Math.round((1 - ratio) * 100)))} % less often`
  if (ratio < NEARLY_ONE) return `${Math.max(1, Math.round((ratio - 1) * 100))} % more often`
  const figure = ratioFigure(ratio)
  return figure === '2.0' ? 'twice as often' : `${figure} times as often`
}

function where({ factor, level, pair }: FindingInWords): string {
  return pair ? pairPhrase(level.name, pair.level.name) : levelPhrase(factor, level.name)
}

/** Compared inside firings, or between firings. */
function againstWhat({ comparison, factor }: FindingInWords): string {
  if (comparison === 'within-firing') return 'other ware in the same firings'
  return factorOf(factor)?.of === 'firing'
    ? 'other firings of the same studio and kind'
    : 'other ware of the same studio and kind of firing'
}

/**
 * "S-cracks show **2.2 times as often** on ware of porcelain, compared with other ware in the same
 * firings." The strong stretch carries the figure.
 */
export function findingSentence(finding: FindingInWords): Stretch[] {
  const { subject, present, past, base } = faultWords(finding.fault)
  const { ratio, exposed } = finding
  const others = againstWhat(finding)
  if (ratio === null) {
    return [
      { text: `${subject} ${past} ` },
      { text: `only ${where(finding)}`, strong: true },
      { text: `, never on ${others.replace(/^other firings/, 'ware of other firings')}.` },
    ]
  }
  if (ratio === 0 || exposed.events === 0) {
    return [
      { text: `${subject} ` },
      { text: `did not ${base} at all`, strong: true },
      { text: ` ${where(finding)}, compared with ${others}.` },
    ]
  }
  return [
    { text: `${subject} ${present} ` },
    { text: howOften(ratio), strong: true },
    { text: ` ${where(finding)}, compared with ${others}.` },
  ]
}

/** The same as plain text. */
export function findingText(finding: FindingInWords): string {
  return plainText(findingSentence(finding))
}

/** "78 of 912"; weighted counts are rounded. */
function counted({ events, units }: FindingInWords['exposed']): string {
  return `${formatCount(Math.round(events))} of ${formatCount(Math.round(units))}`
}

/**
 * "In the 41 firings that held both: **78 of 912** pieces against **91 of 2,338**." Between firings it
 * says that this is the weaker comparison.
 */
export function findingCounts(finding: FindingInWords): Stretch[] {
  const { exposed, unexposed, mixedStrata } = finding
  const noun = Math.round(exposed.units) === 1 ? ' piece' : ' pieces'
  const figures: Stretch[] = [
    { text: counted(exposed), strong: true },
    { text: `${noun} against ` },
    { text: counted(unexposed), strong: true },
  ]
  if (finding.comparison === 'within-firing') {
    const firings =
      mixedStrata === 1
        ? 'In the 1 firing that held both: '
        : `In the ${formatCount(mixedStrata)} firings that held both: `
    return [{ text: firings }, ...figures, { text: '.' }]
  }
  return [...figures, { text: `. ${betweenNote(finding)}` }]
}

/** Why a comparison between firings says less; empty for one inside firings. */
export function betweenNote({
  comparison,
  informativeStrata,
}: Pick<FindingInWords, 'comparison' | 'informativeStrata'>): string {
  if (comparison === 'within-firing') return ''
  return `Compared between firings: weaker, for ${plural(informativeStrata, 'firing')} may differ in more than this.`
}

/** "every other drying practice": the other side of the comparison. */
export function otherSide({ factor, pair }: Pick<FindingInWords, 'factor' | 'pair'>): string {
  if (pair) return 'every other pair of glaze and clay body'
  return `every other ${(factorOf(factor)?.name ?? factor).toLowerCase()}`
}

/** "2.2 (1.5 to 3.1), q 0.003": the figure with its 95 % interval. */
export function ratioLine({
  ratio,
  lower,
  upper,
  qValue,
}: Pick<FindingInWords, 'ratio' | 'lower' | 'upper' | 'qValue'>): string {
  const figure = ratio === null ? 'no ratio' : ratioFigure(ratio)
  const interval =
    lower === null || upper === null ? '' : ` (${ratioFigure(lower)} to ${ratioFigure(upper)})`
  return `${figure}${interval}, q ${qFigure(qValue)}`
}

/** "0.003", "0.08", "under 0.001". */
export function qFigure(q: number): string {
  if (q < 0.001) return 'under 0.001'
  return q < 0.01 ? q.toFixed(3) : q.toFixed(2)
}

/** How much luck is in findings as sure as this one. */
export function qInWords(q: number): string {
  const oneIn = q <= 1 / MOST_IN_WORDS ? MOST_IN_WORDS : Math.floor(1 / q + 1e-9)
  if (oneIn < 2) return 'Findings no surer than this one are mostly luck.'
  return `Of findings as sure as this one, about 1 in ${formatCount(rounded(oneIn))} or fewer is luck.`
}

/** Two leading digits are all that q bears. */
function rounded(n: number): number {
  const step = 10 ** Math.max(0, Math.floor(Math.log10(n)) - 1)
  return Math.floor(n / step) * step
}

/** "One of 214 comparisons made that night. Drying practice was not recorded for 29 % of pieces." */
export function lookedAt(
  comparisons: number,
  { factor, recordedShare }: Pick<FindingInWords, 'factor' | 'recordedShare'>,
): string {
  const made =
    comparisons === 1
      ? 'The only comparison made that night.'
      : `One of ${formatCount(comparisons)} comparisons made that night.`
  return `${made} ${recordedInWords(factor, recordedShare)}`
}

function recordedInWords(factor: string, share: number): string {
  const name = factorOf(factor)?.name ?? factor
  const missing = Math.round((1 - share) * 100)
  if (missing > 0) return `${name} was not recorded for ${missing} % of pieces.`
  return share < 1
    ? `${name} was recorded for nearly all pieces.`
    : `${name} was recorded for all pieces.`
}
