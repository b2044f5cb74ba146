/** Whole numbers and plural forms of English prose, the same in pages, mails and tables. */

const WHOLE = new Intl.NumberFormat('en-GB', { maximumFractionDigits: 0 })

/** A count with thousands separated: 17806 is "17,806". */
export function formatCount(n: number): string {
  return WHOLE.format(n)
}

/**
 * A count with its noun: `plural(1, 'piece')` is "1 piece", `plural(2, 'piece')` "2 pieces",
 * `plural(3, 'loss', 'losses')` "3 losses". Zero takes the plural.
 */
export function plural(n: number, one: string, many = `${one}s`): string {
  return `${formatCount(n)} ${n === 1 ? one : many}`
}
