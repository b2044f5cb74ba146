/** cohort.csv is made data: 300 firings with the effects that cohort-truth.json states. */
import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { parseLotSheet } from '../../../server/imports/lotSheet.js'
import { studyOfLotSheet } from '../../../server/imports/lotSheetStudy.js'
import { STUDY_FAULTS, studyLots, StudyTableBuilder } from '../../../server/study/index.js'
import { shuffled } from './madeRows.js'

interface Truth {
  rows: number
  firings: number
  units: number
  everythingElse: unknown
  effects: { fault: string; factor: string; level: string; ratio: number }[]
  pairEffects: {
    glaze: string
    clay_body: string
    ratio: number
    exposedUnits: number
    exposedEvents: number
  }[]
}

const here = (name: string) => readFileSync(new URL(name, import.meta.url), 'utf8')
const truth = JSON.parse(here('cohort-truth.json')) as Truth
const sheet = parseLotSheet(here('cohort.csv'))
const { factors, rows } = studyOfLotSheet(sheet)

function studyOf(given: typeof rows) {
  const builder = new StudyTableBuilder(factors)
  for (const row of given) builder.push(row)
  return studyLots(builder.build(), { faults: STUDY_FAULTS })
}

const result = studyOf(rows)
const found = (fault: string, ...levels: string[]) =>
  result.findings.find((one) => one.fault === fault && one.levels.join() === levels.join())
const planted = (fault: string) => truth.effects.find((effect) => effect.fault === fault)

describe('the study of cohort.csv', { timeout: 30_000 }, () => {
  it('reads every lot of the sheet', () => {
    expect(sheet.problems).toEqual([])
    expect(result).toMatchObject({
      lots: truth.rows,
      firings: truth.firings,
      pieces: truth.units,
      notAtRisk: [],
    })
  })

  it.each([
    ['joint-crack', 'joint_crack'],
    ['s-crack', 's_crack'],
  ])(
    'reports the planted level of %s raised with q ≤ 0.01 and the true ratio inside its limits',
    (fault, name) => {
      const effect = planted(name)
      expect(effect).toBeDefined()
      const finding = found(fault, effect?.level ?? '')
      expect(finding).toMatchObject({
        factors: [effect?.factor],
        direction: 'raised',
        comparison: 'within-firings',
      })
      expect(finding?.qValue).toBeLessThanOrEqual(0.01)
      expect(finding?.lower).toBeLessThan(effect?.ratio ?? 0)
      expect(finding?.upper).toBeGreaterThan(effect?.ratio ?? 0)
    },
  )

  it('finds the glaze that does not fit one clay body as a pair, on the pieces that the truth counts', () => {
    const [pair] = truth.pairEffects
    const finding = found('crazing', pair?.glaze ?? '', pair?.clay_body ?? '')
    expect(finding?.qValue).toBeLessThanOrEqual(0.01)
    const line = finding?.table.find(({ level }) => level.join() === finding.levels.join())
    expect(line).toMatchObject({ units: pair?.exposedUnits, events: pair?.exposedEvents })
  })

  it('does not report the glaze that is used almost only in the bad kiln', () => {
    expect(found('dunt', 'iron red')).toBeUndefined()
  })

  it('gives every finding its coverage and a table of all levels with limits around the rate', () => {
    const finding = found('s-crack', 'porcelain')
    expect(finding?.coverage).toBe(1)
    expect(finding?.table).toHaveLength(5)
    expect(finding?.table.reduce((sum, line) => sum + line.units, 0)).toBe(truth.units)
    for (const { rate, lower, upper } of finding?.table ?? []) {
      expect(lower).toBeLessThanOrEqual(rate as number)
      expect(upper).toBeGreaterThanOrEqual(rate as number)
    }
  })

  it('gives the same to the last digit when the lots come in another order', () => {
    expect(studyOf(shuffled(rows, 3))).toEqual(result)
  })

  it('leaves the seams of the later steps empty', () => {
    expect(result.findings[0]).toMatchObject({
      verdict: null,
      adjusted: null,
      worth: null,
      memory: null,
    })
  })
})
