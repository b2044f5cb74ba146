import type { Measure } from '../../../server/shared/counts.js'

interface MeasureWords {
  title: string
  meaning: string
  rate: string
  /** "were …". */
  verb: string
}

/** The three rates, always named. */
export const MEASURE_WORDS: Readonly<Record<Measure, MeasureWords>> = {
  loss: { title: 'Losses', meaning: 'wasters and refires', rate: 'loss rate', verb: 'lost' },
  waste: { title: 'Waste', meaning: 'wasters', rate: 'waste rate', verb: 'wasters' },
  blemish: { title: 'Blemishes', meaning: 'seconds', rate: 'blemish rate', verb: 'seconds' },
}
