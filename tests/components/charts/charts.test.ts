import { flushPromises } from '@vue/test-utils'
import { describe, expect, it } from 'vitest'
import { LIGHT } from '../../../server/shared/tokens.js'
import CellBars from '../../../src/components/charts/CellBars.vue'
import ChartFrame from '../../../src/components/charts/ChartFrame.vue'
import { niceScale } from '../../../src/components/charts/chartTheme'
import {
  axisPercent,
  rateChartOptions,
  rateSeries,
  rateTip,
} from '../../../src/components/charts/rateChartOptions'
import { byName, mountUi } from '../../support/components'

const point = (key: string, rate: number | null) => ({
  key,
  label: key,
  rate,
  lower: rate === null ? null : rate - 0.02,
  upper: rate === null ? null : rate + 0.03,
  counts: '31 of 412 pieces in 27 firings',
})
const points = [
  point('Dec', 0.08),
  { ...point('Jan', 0.1), signal: 'above the limit' },
  point('Feb', null),
]

describe('niceScale', () => {
  it.each([
    [0.083, 0.1],
    [0.13, 0.15],
    [0.31, 0.4],
    [0.004, 0.004],
    [0, 0.1],
  ])('ends the axis of values up to %f at %f', (largest, max) => {
    expect(niceScale(largest).max).toBe(max)
  })

  it('has two to five steps', () => {
    for (const largest of [0.001, 0.007, 0.019, 0.05, 0.26, 0.9]) {
      expect(niceScale(largest).steps).toBeGreaterThanOrEqual(2)
      expect(niceScale(largest).steps).toBeLessThanOrEqual(5)
    }
  })
})

describe('the chart of a rate', () => {
  const options = rateChartOptions(points, { rate: 0.09, label: 'year 9.0 %' }, LIGHT, 800)

  it('draws each interval from its lower to its upper end', () => {
    const [below, interval] = rateSeries(points) as { data: { y: number | null }[] }[]
    expect(below?.data[0]?.y).toBeCloseTo(0.06)
    expect(interval?.data[0]?.y).toBeCloseTo(0.05)
  })

  it('leaves a gap where there is too little to say', () => {
    for (const series of rateSeries(points) as { data: { y: number | null }[] }[])
      expect(series.data[2]?.y).toBeNull()
  })

  it('begins at nought, without toolbar or movement', () => {
    expect(options.yaxis).toMatchObject({ min: 0, max: 0.15 })
    expect(options.chart).toMatchObject({
      toolbar: { show: false },
      animations: { enabled: false },
    })
  })

  it('draws the year as a dashed line with its name at the end', () => {
    expect(options.annotations?.yaxis).toMatchObject([
      { y: 0.09, strokeDashArray: 4, label: { text: 'year 9.0 %', position: 'right' } },
    ])
  })

  it('shows signals alone in iron', () => {
    expect(options.markers?.discrete).toMatchObject([
      { dataPointIndex: 1, fillColor: LIGHT.iron, shape: 'square' },
    ])
  })

  it('writes fewer labels where there is less room', () => {
    const year = Array.from({ length: 12 }, (_, month) => point(String(month), 0.05))
    const written = (width: number): number => {
      const format = rateChartOptions(year, undefined, LIGHT, width).xaxis?.labels?.formatter as
        ((step: string) => string) | undefined
      return year.filter((_, step) => format?.(String(step))).length
    }
    expect(written(1200)).toBe(12)
    expect(written(358)).toBe(6)
  })

  it('has decimals on its axis only where the steps need them', () => {
    expect(axisPercent(0.05, 0.05)).toBe('5 %')
    expect(axisPercent(0.005, 0.005)).toBe('0.5 %')
  })

  it('escapes what it shows when a point is touched', () => {
    expect(rateTip({ ...point('<b>', 0.08), counts: 'a & b' })).toContain(
      '&lt;b&gt;<br><strong>8.0 %</strong><br>a &amp; b',
    )
  })
})

describe('ChartFrame', () => {
  const frame = () =>
    mountUi(ChartFrame, {
      props: {
        title: 'Month by month',
        columns: [
          { key: 'label', label: 'month' },
          { key: 'counts', label: 'lost' },
        ],
        rows: points,
        rowKey: (row: { key: string }) => row.key,
        rowLink: (row: { key: string }) => ({
          name: 'firings',
          params: { network: 'kettle' },
          query: { from: row.key },
        }),
        csvHref: '/api/x.csv',
      },
      slots: { default: '<p class="picture">the chart</p>' },
    })

  it('shows the picture first', async () => {
    const { wrapper } = await frame()
    expect(wrapper.find('.picture').exists()).toBe(true)
    expect(wrapper.find('table').exists()).toBe(false)
  })

  it('shows the same as a table, whose rows lead to the firings', async () => {
    const { wrapper } = await frame()
    byName('button', 'as a table').click()
    await flushPromises()
    expect(wrapper.find('.picture').exists()).toBe(false)
    expect(wrapper.findAll('tbody a').map((link) => link.attributes('href'))).toEqual([
      '/kettle/firings?from=Dec',
      '/kettle/firings?from=Jan',
      '/kettle/firings?from=Feb',
    ])
    expect(byName('button', 'as a picture').getAttribute('aria-pressed')).toBe('true')
  })
})

describe('CellBars', () => {
  it('draws all bars on the scale of the longest, each with its count in words', async () => {
    const rows = [
      { name: 'S-crack', n: 241 },
      { name: 'Crazing', n: 12 },
    ]
    const { wrapper } = await mountUi(CellBars, {
      props: {
        rows,
        label: (row: { name: string }) => row.name,
        counts: (row: { n: number }) => ({ first: 0, waster: row.n }),
      },
    })
    expect(wrapper.findAll('svg').map((svg) => svg.attributes('aria-label'))).toEqual([
      '241 pieces: 241 wasters',
      '12 pieces: 12 wasters',
    ])
    expect(wrapper.text()).toContain('each cell is 20 pieces')
  })
})
