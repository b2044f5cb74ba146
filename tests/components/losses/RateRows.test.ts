import { describe, expect, it } from 'vitest'
import type { LossRow } from '../../../server/contract/losses.js'
import RateRows from '../../../src/components/losses/RateRows.vue'
import { mountUi } from '../../support/components'

type Rate = LossRow['rates']['loss']
const rate = (over: Partial<Rate>): Rate => ({
  events: 10,
  pieces: 100,
  firings: 12,
  rate: 0.1,
  lower: 0.06,
  upper: 0.16,
  note: 'ok',
  ...over,
})
const row = (key: string, over: Partial<Rate>): LossRow => ({
  key,
  label: key,
  uid: null,
  rates: { loss: rate(over), waste: rate({}), blemish: rate({}) },
})

async function shown(rows: LossRow[]) {
  const { wrapper } = await mountUi(RateRows, {
    props: {
      caption: 'Rates by kiln',
      what: 'kiln',
      rows,
      measure: 'loss',
      overall: 0.05,
      verb: 'lost',
      rowLink: () => undefined,
      csvHref: '/losses.csv',
    },
  })
  return wrapper.findAll('tbody tr').map((line) => ({
    text: line.text(),
    warm: line.find('.loss').exists(),
  }))
}

describe('rates side by side', () => {
  it('are warm only where the whole interval lies above the rate of all', async () => {
    const [worse, unsure] = await shown([
      row('North', {}),
      row('South', { lower: 0.04, upper: 0.2 }),
    ])
    expect(worse?.warm).toBe(true)
    expect(unsure?.warm).toBe(false)
  })

  it('say few firings in words, and never warm them', async () => {
    const [few] = await shown([row('Raku', { firings: 3, note: 'few-firings', lower: 0.2 })])
    expect(few?.text).toContain('few firings')
    expect(few?.warm).toBe(false)
  })

  it('show counts alone for one firing', async () => {
    const [one] = await shown([
      row('New', { firings: 1, rate: null, lower: null, upper: null, note: 'one-firing' }),
    ])
    expect(one?.text).toContain('10')
    expect(one?.text).not.toContain('%')
    expect(one?.text).toContain('one firing says too little')
  })
})
