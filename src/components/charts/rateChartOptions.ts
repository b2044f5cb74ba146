import type { ApexOptions } from 'apexcharts'
import { percent } from '../../../server/shared/sentences/rate.js'
import type { Palette } from '../../../server/shared/tokens.js'
import { FONT_FAMILY } from '../../../server/shared/tokens.js'
import { chartTheme, niceScale } from './chartTheme'

/** One month (or other step) of a rate. Shares 0..1; null where there is too little to say. */
export interface RatePoint {
  key: string
  /** Under the axis: "Feb". */
  label: string
  rate: number | null
  lower: number | null
  upper: number | null
  /** What it rests on: "31 of 412 pieces in 27 firings". */
  counts: string
  /** Said beside the point, in iron: a signal in words. */
  signal?: string
}

export interface RateReference {
  rate: number
  /** At its end: "year 7.4 %". */
  label: string
}

type Series = NonNullable<ApexOptions['series']>

/**
 * Intervals as thin bars, drawn under the line: a clear column up to the lower end, then a coloured
 * one up to the upper end. (A candlestick would be simpler, but lies over the line.)
 */
export function rateSeries(points: readonly RatePoint[]): Series {
  const column = (height: (lower: number, upper: number) => number) =>
    points.map(({ lower, upper }, x) => ({
      x,
      y: lower === null || upper === null ? null : height(lower, upper),
    }))
  return [
    { name: 'below', type: 'column', data: column((lower) => lower) },
    { name: 'interval', type: 'column', data: column((lower, upper) => upper - lower) },
    { name: 'rate', type: 'line', data: points.map(({ rate }, x) => ({ x, y: rate })) },
  ] as Series
}

const LINE = 2

/** Options of the chart of a rate over time; `width` in px decides how many labels stand under it. */
export function rateChartOptions(
  points: readonly RatePoint[],
  reference: RateReference | undefined,
  palette: Readonly<Palette>,
  width: number,
): ApexOptions {
  const theme = chartTheme(palette)
  const largest = Math.max(
    0,
    reference?.rate ?? 0,
    ...points.map(({ rate, upper }) => upper ?? rate ?? 0),
  )
  const { max, steps } = niceScale(largest)
  const signals = points.flatMap((point, index) =>
    point.signal && point.rate !== null ? [{ point, index }] : [],
  )
  const axis = theme.yaxis as ApexYAxis
  return {
    ...theme,
    chart: { ...theme.chart, type: 'line', stacked: true, stackOnlyBar: true },
    stroke: { width: [0, 0, 1.5], curve: 'straight' },
    colors: ['transparent', palette.cobaltSoft, palette.cobalt],
    fill: { type: 'solid', opacity: [0, 0.55, 1] },
    plotOptions: { bar: { columnWidth: `${barShare(points.length, width)}%` } },
    grid: { ...theme.grid, padding: { ...theme.grid?.padding, right: reference ? 84 : 8 } },
    markers: {
      ...theme.markers,
      size: [0, 0, 4],
      discrete: signals.map(({ index }) => square(index, palette)),
    },
    annotations: { yaxis: reference ? [referenceLine(reference, palette)] : [] },
    dataLabels: signalWords(points, palette),
    xaxis: {
      ...theme.xaxis,
      // Steps are numbered: as categories two Februaries would be one.
      type: 'numeric',
      ...(points.length > 1
        ? { min: 0, max: points.length - 1, tickAmount: points.length - 1 }
        : { min: -1, max: 1, tickAmount: 2 }),
      labels: {
        ...theme.xaxis?.labels,
        hideOverlappingLabels: false,
        formatter: axisLabels(points, width),
      },
    },
    yaxis: {
      ...axis,
      min: 0,
      max,
      tickAmount: steps,
      labels: { ...axis.labels, formatter: (share: number) => axisPercent(share, max / steps) },
    },
  }
}

/** Share of a step's room that makes a bar about 6 px wide. */
function barShare(count: number, width: number): number {
  return Math.min(60, Math.max(2, Math.round((600 * count) / Math.max(200, width - 120))))
}

/** Every label where there is room for 48 px each, else every second, third ... */
function axisLabels(points: readonly RatePoint[], width: number): (step: string) => string {
  const every = Math.max(1, Math.ceil((points.length * 48) / Math.max(200, width - 60)))
  return (step) => (Number(step) % every === 0 ? (points[Number(step)]?.label ?? '') : '')
}

function square(index: number, palette: Readonly<Palette>) {
  return {
    seriesIndex: LINE,
    dataPointIndex: index,
    fillColor: palette.iron,
    strokeColor: palette.iron,
    size: 5,
    shape: 'square' as const,
  }
}

/** "5 %" on the axis; decimals only where the steps need them. */
export function axisPercent(share: number, step: number): string {
  const decimals = step >= 0.0099 ? 0 : step >= 0.00099 ? 1 : 2
  return `${(share * 100).toFixed(decimals)} %`
}

function referenceLine({ rate, label }: RateReference, palette: Readonly<Palette>) {
  return {
    y: rate,
    borderColor: palette.ink2,
    strokeDashArray: 4,
    label: {
      text: label,
      position: 'right',
      textAnchor: 'start',
      offsetX: 8,
      offsetY: 8,
      borderWidth: 0,
      style: words(palette.ink2),
    },
  }
}

/** Signals beside their points, in words. */
function signalWords(points: readonly RatePoint[], palette: Readonly<Palette>): ApexDataLabels {
  return {
    enabled: points.some(({ signal }) => signal),
    enabledOnSeries: [LINE],
    formatter: (_value, { dataPointIndex }: { dataPointIndex: number }) =>
      `\u00a0\u00a0\u00a0${points[dataPointIndex]?.signal ?? ''}`,
    textAnchor: 'start',
    // Spaces instead of an offset: 4.7.0 leaves out columns whose label would begin beyond the grid.
    offsetX: 0,
    offsetY: -8,
    style: { colors: [palette.iron], fontSize: '12px', fontWeight: 400, fontFamily: FONT_FAMILY },
    background: { enabled: false },
  }
}

function words(color: string) {
  return {
    color,
    background: 'transparent',
    fontSize: '12px',
    padding: { left: 0, right: 0, top: 0, bottom: 0 },
  }
}

/** What is read when a point is touched; the text is escaped. */
export function rateTip({ label, rate, lower, upper, counts }: RatePoint): string {
  const share = rate === null ? '' : `<strong>${percent(rate)}</strong>`
  const interval =
    lower === null || upper === null ? '' : `likely between ${percent(lower)} and ${percent(upper)}`
  return [escapeText(label), share, escapeText(counts), interval].filter(Boolean).join('<br>')
}

function escapeText(text: string): string {
  return text
    .replace(/&/g, '&amp;')
    .replace(/</g, '&lt;')
    .replace(/>/g, '&gt;')
    .replace(/"/g, '&quot;')
}
