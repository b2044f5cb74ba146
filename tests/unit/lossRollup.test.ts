import { describe, expect, it } from 'vitest'
import { FAULT_RULES } from '../../server/shared/faults/index.js'
import { NO_COUNTS } from '../../server/shared/counts.js'
import { REFIRED, Rollup, SUM_COLUMNS } from '../../server/shared/lossRollup.js'
import type { RollupFiring, RollupLot } from '../../server/shared/lossRollup.js'
import { countsOf, familiesOf, measureSums } from '../../server/shared/lossRollupRates.js'
import { addFiring } from '../../server/shared/rollUpFiring.js'

const lot = (over: Partial<RollupLot> = {}): RollupLot => ({
  ...NO_COUNTS,
  pieces: 10,
  refireCount: 0,
  forming: null,
  hasGlaze: null,
  hasJoint: null,
  levels: [],
  losses: [],
  ...over,
})

const firing = (lots: RollupLot[], over: Partial<RollupFiring> = {}): RollupFiring => ({
  studioId: 1,
  kilnId: 2,
  kind: 'glaze',
  month: '2026-03-01',
  levels: [],
  lots,
  ...over,
})

/** Sums by family of one slice. */
function slice(rollup: Rollup, factor = '', levelId = 0): Map<string, number[]> {
  const rows = [...rollup.values()].filter(
    (row) => row.factor === factor && row.levelId === levelId,
  )
  return new Map(rows.map(({ fault, sums }) => [fault, sums]))
}

function rolled(...firings: RollupFiring[]): Rollup {
  const rollup = new Rollup()
  for (const each of firings) addFiring(rollup, each)
  return rollup
}

describe('the roll-up of a firing', () => {
  it('sums pieces fired and looked at, and their squares over firings', () => {
    const rollup = rolled(
      firing([lot({ wasters: 1, notLookedAt: 2 }), lot({ turnedAway: 1, refires: 3 })]),
      firing([lot({ wasters: 5 })]),
    )
    // 17 pieces with 4 lost, 10 pieces with 5 lost.
    expect(measureSums(slice(rollup), null, 'loss')).toEqual({
      G: 2,
      sumUnits: 27,
      sumEvents: 9,
      sumUnits2: 17 * 17 + 10 * 10,
      sumUnitsEvents: 17 * 4 + 10 * 5,
      sumEvents2: 4 * 4 + 5 * 5,
    })
    expect(countsOf(slice(rollup).get(''))).toEqual({
      ...NO_COUNTS,
      pieces: 30,
      turnedAway: 1,
      refires: 3,
      wasters: 6,
      notLookedAt: 2,
    })
  })

  it('keeps no row of differences where nothing is ruled out', () => {
    const rollup = rolled(
      firing([
        lot({ wasters: 1, losses: [{ fault: 'crazing', also: [], outcome: 'waster', pieces: 1 }] }),
      ]),
    )
    expect([...slice(rollup).keys()].sort()).toEqual(['', 'crazing', 'glaze-fit'])
  })

  it('counts a piece with two faults below one node once there', () => {
    const losses = [
      { fault: 's-crack', also: ['star-base-crack'], outcome: 'waster' as const, pieces: 2 },
    ]
    const sums = slice(rolled(firing([lot({ wasters: 2, losses })])))
    expect(measureSums(sums, 'base-crack', 'loss').sumEvents).toBe(2)
    expect(measureSums(sums, 'crack-not-named', 'loss').sumEvents).toBe(2)
  })

  it('holds a lot with two glazes once where the factor is recorded at all', () => {
    const levels = [
      { factor: 'glaze', levelId: 7 },
      { factor: 'glaze', levelId: 8 },
    ]
    const rollup = rolled(firing([lot({ levels }), lot()]))
    for (const levelId of [0, 7, 8]) expect(slice(rollup, 'glaze', levelId).get('')?.[1]).toBe(10)
  })

  it('takes refired pieces as the denominator of refire faults alone', () => {
    const losses = [{ fault: 'refire-crack', also: [], outcome: 'waster' as const, pieces: 1 }]
    const rollup = rolled(firing([lot(), lot({ pieces: 4, refireCount: 1, wasters: 1, losses })]))
    expect(measureSums(slice(rollup), 'refire-crack', 'loss')).toMatchObject({
      sumUnits: 4,
      sumEvents: 1,
    })
    expect(measureSums(slice(rollup), null, 'loss')).toMatchObject({ sumUnits: 10, sumEvents: 0 })
    expect(measureSums(slice(rollup, REFIRED), null, 'loss')).toMatchObject({
      sumUnits: 4,
      sumEvents: 1,
    })
  })

  it('is taken away again whole', () => {
    const losses = [{ fault: 'crawling', also: [], outcome: 'second' as const, pieces: 1 }]
    const one = firing(
      [lot({ seconds: 1, hasGlaze: true, losses, levels: [{ factor: 'form', levelId: 3 }] })],
      { levels: [{ factor: 'cooling', levelId: 4 }] },
    )
    const rollup = rolled(one)
    addFiring(rollup, one, -1)
    expect([...rollup.values()].flatMap(({ sums }) => sums).every((sum) => sum === 0)).toBe(true)
  })

  it('names families that fit their column of 41 characters', () => {
    const names = FAULT_RULES.flatMap(({ id }) => familiesOf(id))
    expect(Math.max(...names.map(({ length }) => length))).toBeLessThanOrEqual(41)
    expect(SUM_COLUMNS).toHaveLength(16)
  })
})
