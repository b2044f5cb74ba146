import type { LossRow } from '../contract/losses.js'
import { MEASURES } from '../shared/counts.js'

type Cell = string | number | null

/** Headings of a breakdown as CSV; `dimension` is what its rows are. */
export function lossCsvHeadings(dimension: string): string[] {
  const of = (measure: string): string[] => [
    `${measure}: pieces`,
    `${measure}: of pieces`,
    `${measure}: firings`,
    `${measure} rate`,
    `${measure}: lower limit (95 %)`,
    `${measure}: upper limit (95 %)`,
    `${measure}: too little data`,
  ]
  return [dimension, ...MEASURES.flatMap(of)]
}

/** One row of a breakdown under `lossCsvHeadings`; rates are shares, whole, not rounded for reading. */
export function presentLossCsv({ label, rates }: LossRow): Cell[] {
  const cells = MEASURES.flatMap((measure) => {
    const { events, pieces, firings, rate, lower, upper, note } = rates[measure]
    return [events, pieces, firings, rate, lower, upper, note === 'ok' ? '' : note]
  })
  return [label, ...cells]
}
