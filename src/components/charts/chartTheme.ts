/**
 * The one look of all charts: thin cobalt lines, small squares, horizontal hairlines, no toolbar, no
 * movement. Charts take it and add their data; a colour or a font stands in no other file.
 */
import type { ApexOptions } from 'apexcharts'
import type { Palette } from '../../../server/shared/tokens.js'
import { FONT_FAMILY } from '../../../server/shared/tokens.js'

/** At most four series in one picture; more become small multiples. */
export function seriesColours(palette: Readonly<Palette>): string[] {
  return [palette.cobalt, palette.cobaltSoft, palette.ink2, palette.celadon]
}

/** Upper end of a zero-based axis with round steps, and how many steps: 0.083 gives 0.1 in 5 steps of 2 %. */
export function niceScale(largest: number): { max: number; steps: number } {
  if (!(largest > 0)) return { max: 0.1, steps: 2 }
  const ten = 10 ** Math.floor(Math.log10(largest))
  const step = [0.2, 0.5, 1, 2, 5].map((n) => n * ten).find((n) => largest / n <= 5) ?? ten * 10
  const steps = Math.ceil(largest / step - 1e-9)
  return { max: Number((steps * step).toPrecision(6)), steps }
}

/** What every chart has. Zero-based; at most 150 ms of movement would be allowed, none is used. */
export function chartTheme(palette: Readonly<Palette>): ApexOptions {
  const label = { colors: palette.ink2, fontSize: '14px', fontFamily: FONT_FAMILY }
  return {
    chart: {
      background: 'transparent',
      foreColor: palette.ink2,
      fontFamily: FONT_FAMILY,
      toolbar: { show: false },
      zoom: { enabled: false },
      selection: { enabled: false },
      animations: { enabled: false },
      parentHeightOffset: 0,
      redrawOnParentResize: true,
    },
    colors: seriesColours(palette),
    dataLabels: { enabled: false },
    fill: { opacity: 1, type: 'solid' },
    grid: {
      borderColor: palette.rule,
      strokeDashArray: 0,
      xaxis: { lines: { show: false } },
      yaxis: { lines: { show: true } },
      padding: { top: 0, right: 8, bottom: 0, left: 8 },
    },
    legend: { show: false },
    markers: { shape: 'square', size: 4, strokeWidth: 0, hover: { sizeOffset: 2 } },
    states: {
      hover: { filter: { type: 'none' } },
      active: { filter: { type: 'none' } },
    },
    stroke: { width: 1.5, curve: 'straight' },
    xaxis: {
      axisBorder: { show: false },
      axisTicks: { show: false },
      crosshairs: { show: true, stroke: { color: palette.cobaltSoft, width: 1, dashArray: 0 } },
      labels: { style: label, rotate: 0, hideOverlappingLabels: true },
      tooltip: { enabled: false },
    },
    yaxis: { min: 0, labels: { style: label } },
    tooltip: { theme: '', followCursor: false },
  }
}
