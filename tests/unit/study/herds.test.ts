/**
 * Real counts in the shape of a lot sheet: contagious pleuropneumonia of cattle by herd and period (R package lme4, data
 * set cbpp; Lesnoff and others 2004). A herd stands for a firing and a period for a drying practice. The published
 * analyses find the incidence falling from period to period; inside herds the first is 2.5 times the others.
 */
import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { parseLotSheet } from '../../../server/imports/lotSheet.js'
import { studyOfLotSheet } from '../../../server/imports/lotSheetStudy.js'
import { STUDY_FAULTS, studyLots, StudyTableBuilder } from '../../../server/study/index.js'

interface Cattle {
  response: number[]
  units: number[]
  cluster: string[]
  columns: Record<'period2' | 'period3' | 'period4', number[]>
}

const file = JSON.parse(readFileSync(new URL('modifiedPoisson.json', import.meta.url), 'utf8')) as {
  cases: { source: string; input: Cattle }[]
}
const { response, units, cluster, columns } = file.cases[0]?.input as Cattle

function sheetOf(header: string): string {
  const lines = response.map((incidence, i) => {
    const period =
      (['period2', 'period3', 'period4'] as const).find((name) => columns[name][i] === 1) ??
      'period1'
    return [cluster[i], period, units[i], incidence].join()
  })
  return [header, ...lines].join('\n')
}

function studyOf(text: string) {
  const sheet = parseLotSheet(text)
  const { factors, rows } = studyOfLotSheet(sheet)
  const builder = new StudyTableBuilder(factors)
  for (const row of rows) builder.push(row)
  return { sheet, result: studyLots(builder.build(), { faults: STUDY_FAULTS }) }
}

describe('the study of the cattle herds', () => {
  const { sheet, result } = studyOf(sheetOf('firing_id,drying_practice,units,lost_s_crack'))
  const first = result.findings.find(({ levels }) => levels[0] === 'period1')

  it('reads 56 lots of 15 herds', () => {
    expect(sheet.problems).toEqual([])
    expect(result).toMatchObject({ lots: 56, firings: 15 })
  })

  it('finds the first period raised inside herds, with the ratio and limits of the reference', () => {
    expect(first).toMatchObject({
      fault: 's-crack',
      factors: ['drying_practice'],
      direction: 'raised',
    })
    // withinStrataTest.json, first case.
    expect(first?.ratio).toBeCloseTo(2.501072945644586, 6)
    expect(first?.lower).toBeCloseTo(1.163047315883765, 6)
    expect(first?.upper).toBeCloseTo(5.378427682180772, 6)
  })

  it('finds it by the exact p, for there are fewer than 100 events', () => {
    expect(first?.method).toBe('dealt')
    expect(first?.pValue).toBeLessThan(0.01)
    expect(first?.qValue).toBeLessThanOrEqual(0.01)
  })

  it('shows the incidence falling from period to period', () => {
    const rates = ['period1', 'period2', 'period3', 'period4'].map(
      (period) => first?.table.find(({ level }) => level[0] === period)?.rate ?? 0,
    )
    expect(rates).toEqual(rates.toSorted((a, b) => b - a))
  })

  it('takes a column that it does not know for a lot factor of its own', () => {
    const { result: named } = studyOf(sheetOf('firing,period,pieces,lost_s_crack'))
    expect(named.findings[0]).toMatchObject({
      factors: ['period'],
      levels: ['period1'],
      direction: 'raised',
    })
  })
})
