import { describe, expect, it } from 'vitest'
import RateText from '../../../src/components/ui/RateText.vue'
import CoverageNote from '../../../src/components/ui/CoverageNote.vue'
import { mountUi } from '../../support/components'

const rate = {
  events: 31,
  pieces: 412,
  firings: 27,
  rate: 31 / 412,
  lower: 0.0521,
  upper: 0.1058,
  note: 'ok',
}
const textOf = async (props: Record<string, unknown>): Promise<string> => {
  const { wrapper } = await mountUi(RateText, { props })
  return wrapper.text().replace(/\s+/g, ' ')
}

describe('RateText', () => {
  it('gives counts, rate and interval', async () => {
    expect(await textOf({ rate })).toBe(
      '31 of 412 pieces in 27 firings, 7.5 %, likely between 5.2 and 10.6 %',
    )
  })

  it('speaks of one piece in one firing in the singular, without a rate', async () => {
    const one = {
      ...rate,
      events: 1,
      pieces: 1,
      firings: 1,
      rate: null,
      lower: null,
      upper: null,
      note: 'one-firing',
    }
    expect(await textOf({ rate: one })).toBe(
      '1 of 1 piece in 1 firing (one firing says too little for a rate)',
    )
  })

  it('warns of few firings', async () => {
    expect(await textOf({ rate: { ...rate, firings: 4, note: 'few-firings' } })).toMatch(
      /in 4 firings, .* \(few firings\)$/,
    )
  })

  it('says in words that there is nothing to count', async () => {
    const none = {
      events: 0,
      pieces: 0,
      firings: 0,
      rate: null,
      lower: null,
      upper: null,
      note: 'none',
    }
    expect(await textOf({ rate: none })).toBe('no pieces to count yet')
  })

  it('keeps its counts when it is short', async () => {
    expect(await textOf({ rate, short: true })).toBe('7.5 %31 of 412 pieces in 27 firings')
  })
})

describe('CoverageNote', () => {
  it('says what is missing', async () => {
    const { wrapper } = await mountUi(CoverageNote, {
      props: {
        coverage: { reported: 11, expected: 14, rateIfMissingClean: null, recordedShare: 0.71 },
      },
    })
    expect(wrapper.text()).toBe(
      'The kilns count 14 firings, 11 of them reported here: 3 missing. Recorded for 71 % of pieces.',
    )
  })

  it('is not there where nothing is known to be missing', async () => {
    const { wrapper } = await mountUi(CoverageNote, {
      props: {
        coverage: { reported: 11, expected: null, rateIfMissingClean: null, recordedShare: null },
      },
    })
    expect(wrapper.find('p').exists()).toBe(false)
  })
})
