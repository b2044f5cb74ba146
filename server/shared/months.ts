/** Months of the calendar, written YYYY-MM. */

const index = (month: string): number =>
  Number(month.slice(0, 4)) * 12 + Number(month.slice(5, 7)) - 1
const written = (at: number): string =>
  `${String(Math.floor(at / 12)).padStart(4, '0')}-${String((at % 12) + 1).padStart(2, '0')}`

/** The month so many months later (earlier when negative). */
export function addMonths(month: string, months: number): string {
  return written(index(month) + months)
}

/** Every month from the first to the last, both included; none when the last comes first. */
export function monthsFrom(first: string, last: string): string[] {
  const count = Math.max(0, index(last) - index(first) + 1)
  return Array.from({ length: count }, (_, i) => addMonths(first, i))
}

/** First and last day of a month, YYYY-MM-DD. */
export function daysOfMonth(month: string): { first: string; last: string } {
  const end = new Date(Date.UTC(Number(month.slice(0, 4)), Number(month.slice(5, 7)), 0))
  return { first: `${month}-01`, last: `${month}-${String(end.getUTCDate()).padStart(2, '0')}` }
}
