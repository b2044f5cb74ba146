/** What is wrong with the counts of a load or a report, beside the field that has to change. */
import { formatCount, plural } from '../plural.js'

/** "The lots hold 105 pieces, 5 more than the firing." */
export function lotsExceed(described: number, pieces: number): string {
  return `The lots hold ${plural(described, 'piece')}, ${formatCount(described - pieces)} more than the firing.`
}

/** "12 turned away, but the lot has 10 pieces." */
export function turnedAwayExceeds(turnedAway: number, pieces: number): string {
  return `${formatCount(turnedAway)} turned away, but the lot has ${plural(pieces, 'piece')}.`
}

/** "6 failed of 5 pieces fired." or, with pieces that nobody looked at, "4 failed and 3 not looked at of 5 pieces fired." */
export function failedExceeds(failed: number, notLookedAt: number, fired: number): string {
  const unseen = notLookedAt > 0 ? `${formatCount(notLookedAt)} not looked at` : ''
  const parts = [failed > 0 || !unseen ? `${formatCount(failed)} failed` : '', unseen].filter(
    Boolean,
  )
  return `${parts.join(' and ')} of ${plural(fired, 'piece')} fired.`
}

/** "Lot 2 and the rest are missing: report each, or say how many were not looked at." */
export function lotsMissing(numbers: readonly number[], rest: boolean): string {
  const lots = numbers.map((number) => formatCount(number))
  const named = lots.length > 0 ? `${lots.length === 1 ? 'Lot' : 'Lots'} ${lots.join(', ')}` : ''
  const names = [named, rest ? (named ? 'the rest' : 'The rest') : ''].filter(Boolean)
  const verb = lots.length + (rest ? 1 : 0) === 1 ? 'is' : 'are'
  return `${names.join(' and ')} ${verb} missing: report each, or say how many were not looked at.`
}
