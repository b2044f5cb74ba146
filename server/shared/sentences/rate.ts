/** Rates and coverage in words. Counts come before percentages, and too little data is said, not shown as a number. */
import { formatCount, plural } from '../plural.js'

/** The part of the contract's rate that is put into words. Shares are 0..1. */
export interface RateInWords {
  events: number
  pieces: number
  firings: number
  rate: number | null
  lower: number | null
  upper: number | null
  note: 'ok' | 'few-firings' | 'one-firing' | 'none'
}

export interface CoverageInWords {
  reported: number
  expected: number | null
  rateIfMissingClean: number | null
  recordedShare: number | null
}

const ONE_DECIMAL = new Intl.NumberFormat('en-GB', {
  minimumFractionDigits: 1,
  maximumFractionDigits: 1,
})

/** A share as the number of a percentage: 0.0752 is "7.5". A share above nought never reads "0.0". */
export function percentNumber(share: number): string {
  const percent = share * 100
  return percent > 0 && percent < 0.05 ? 'under 0.1' : ONE_DECIMAL.format(percent)
}

/** A share as a percentage with its sign: "7.5 %". */
export function percent(share: number): string {
  return `${percentNumber(share)} %`
}

/** "31 of 412 pieces in 27 firings". */
export function rateCounts({ events, pieces, firings }: RateInWords): string {
  return `${formatCount(events)} of ${plural(pieces, 'piece')} in ${plural(firings, 'firing')}`
}

/** "likely between 5.2 and 10.6 %"; empty where there is no interval. */
export function rateInterval({ lower, upper }: RateInWords): string {
  return lower === null || upper === null
    ? ''
    : `likely between ${percentNumber(lower)} and ${percent(upper)}`
}

/** What keeps the rate from saying much; empty where nothing does. */
export function rateCaution(rate: RateInWords): string {
  if (rate.note === 'none') return 'no pieces to count yet'
  if (rate.note === 'one-firing') return 'one firing says too little for a rate'
  return rate.note === 'few-firings' ? 'few firings' : ''
}

/** "31 of 412 pieces in 27 firings, 7.5 %, likely between 5.2 and 10.6 %": counts, rate, interval, caution. */
export function rateSentence(rate: RateInWords): string {
  if (rate.note === 'none') return rateCaution(rate)
  const share = rate.rate === null ? '' : percent(rate.rate)
  const caution = rateCaution(rate)
  const words = [rateCounts(rate), share, rateInterval(rate)].filter(Boolean).join(', ')
  if (caution === '') return words
  return rate.note === 'few-firings' ? `${words} (${caution})` : `${words}: ${caution}`
}

/** How much of what was fired stands behind a rate, one sentence a gap; empty where nothing is known to be missing. */
export function coverageSentences({
  reported,
  expected,
  rateIfMissingClean,
  recordedShare,
}: CoverageInWords): string[] {
  const missing = expected === null ? 0 : expected - reported
  const clean =
    rateIfMissingClean === null
      ? ''
      : `; had they all been clean, it would be ${percent(rateIfMissingClean)}`
  return [
    missing > 0
      ? `The kilns count ${plural(expected ?? 0, 'firing')}, ${formatCount(reported)} of them reported here: ${formatCount(missing)} missing${clean}.`
      : '',
    expected !== null && missing <= 0
      ? `All ${plural(expected, 'firing')} that the kilns count are reported here.`
      : '',
    recordedShare === null ? '' : `Recorded for ${Math.round(recordedShare * 100)} % of pieces.`,
  ].filter(Boolean)
}
