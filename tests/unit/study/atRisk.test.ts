/** At-risk rules: fault-rules.json ("ruleFields"), carried by server/shared/faults/rules.ts. */
import { describe, expect, it } from 'vitest'
import type { StudyRow } from '../../../server/study/index.js'
import { driedFastOrSlow, lost, lot, study } from './madeRows.js'

const one = (rows: StudyRow[], fault: string) =>
  study(rows).every?.find(
    (comparison) => comparison.fault === fault && comparison.levels[0] === 'fast',
  )
const of = (fault: string, change: Partial<StudyRow> = {}) =>
  driedFastOrSlow(30, (row) => ({
    ...row,
    ...change,
    losses: row.losses.map((loss) => ({ ...loss, fault })),
  }))

describe('who is at risk', () => {
  it('counts lots that nothing rules out, whatever is not recorded', () => {
    expect(one(of('s-crack'), 's-crack')).toMatchObject({ exposedUnits: 300, unexposedUnits: 300 })
  })

  it('asks nothing about crazing in a bisque firing and reports the losses for checking', () => {
    const rows = of('crazing')
    const result = study(rows)
    const pieces = rows.flatMap((row) => row.losses).reduce((sum, loss) => sum + loss.pieces, 0)
    expect(result.every?.filter(({ fault }) => fault === 'crazing')).toEqual([])
    expect(result.notAtRisk).toEqual([{ fault: 'crazing', pieces }])
  })

  it.each([
    ['lots known to be unglazed for a glaze fault', 'crazing', { kind: 'glaze', hasGlaze: false }],
    ['lots known to have no joints for a joint fault', 'joint-crack', { hasJoint: false }],
    ['lots made in a way that cannot show the fault', 'slab-hinge-crack', { formingCode: 'coil' }],
    ['first firings for a refire fault', 'refire-crack', { kind: 'glaze', refireCount: 0 }],
  ] as const)('leaves out %s', (_, fault, change) => {
    const result = study(of(fault, change))
    expect(result.every?.filter((comparison) => comparison.fault === fault)).toEqual([])
    expect(result.notAtRisk.map((each) => each.fault)).toContain(fault)
  })

  it('takes refired lots for refire faults and for no others', () => {
    expect(one(of('refire-crack', { kind: 'glaze', refireCount: 1 }), 'refire-crack')).toBeDefined()
    const result = study(of('s-crack', { kind: 'glaze', refireCount: 1 }))
    expect(result).toMatchObject({ comparisons: 0, notAtRisk: [] })
  })

  it('counts pieces turned away for a fault that shows before the firing', () => {
    const turnedAway = driedFastOrSlow(30, (row) => ({
      ...row,
      turnedAway: row.losses[0]?.pieces ?? 0,
      losses: row.losses.map((loss) => ({ ...loss, outcome: 'turned-away' })),
    }))
    expect(one(turnedAway, 's-crack')).toMatchObject({ direction: 'raised', exposedUnits: 300 })
  })

  it('takes pieces turned away out of the pieces for a fault that shows only in the firing', () => {
    const rows = driedFastOrSlow(30, (row) => ({
      ...row,
      pieces: 12,
      turnedAway: 2,
      losses: [
        ...lost('rim-crack', 2, { outcome: 'turned-away' }),
        ...row.losses.flatMap((loss) => lost('dunt', loss.pieces)),
      ],
    }))
    expect(one(rows, 'dunt')).toMatchObject({ exposedUnits: 300, unexposedUnits: 300 })
  })

  it('puts pieces that nobody looked at into no denominator', () => {
    const rows = driedFastOrSlow(30, (row) => ({ ...row, notLookedAt: 3 }))
    expect(one(rows, 's-crack')).toMatchObject({ exposedUnits: 210, unexposedUnits: 210 })
  })
})

describe('what counts as an event', () => {
  const total = (comparison: ReturnType<typeof one>) =>
    (comparison?.exposedEvents ?? 0) + (comparison?.unexposedEvents ?? 0)

  it('counts a child in every node above it', () => {
    const rows = driedFastOrSlow(30, (row) => ({
      ...row,
      losses: [...row.losses, ...lost('star-base-crack', 1)],
    }))
    const result = study(rows)
    const [sCrack, base] = ['s-crack', 'base-crack'].map((fault) =>
      result.every?.find((each) => each.fault === fault && each.levels[0] === 'fast'),
    )
    expect(total(base)).toBe(total(sCrack) + rows.length)
  })

  it('asks a parent that holds one child alone no second time', () => {
    const faults = new Set(study(driedFastOrSlow(30)).every?.map(({ fault }) => fault))
    expect([...faults]).toEqual(['s-crack'])
  })

  it('counts a mention beside the main fault, and a piece once where child and parent are both named', () => {
    const rows = driedFastOrSlow(30, (row) => ({
      ...row,
      losses: row.losses.map((loss) => ({
        ...loss,
        fault: 'warping',
        also: ['s-crack', 'base-crack'],
      })),
    }))
    const plain = one(driedFastOrSlow(30), 's-crack')
    expect(total(one(rows, 's-crack'))).toBe(total(plain))
    expect(total(one(rows, 'warping'))).toBe(total(plain))
  })

  it.each(['second', 'refire', 'waster', 'undecided'])('counts a %s', (outcome) => {
    const rows = driedFastOrSlow(30, (row) => ({
      ...row,
      losses: row.losses.map((loss) => ({ ...loss, outcome })),
    }))
    expect(total(one(rows, 's-crack'))).toBe(total(one(driedFastOrSlow(30), 's-crack')))
  })

  it('leaves pieces that a neighbour took out of events and pieces alike', () => {
    const rows = driedFastOrSlow(30, (row) => ({
      ...row,
      pieces: 14,
      losses: [...row.losses, ...lost('s-crack', 4, { event: true })],
    }))
    expect(one(rows, 's-crack')).toEqual(one(driedFastOrSlow(30), 's-crack'))
  })

  it('leaves a load that failed as a whole out', () => {
    const failed = ['fast', 'slow'].map((drying) =>
      lot({
        firing: 'power cut',
        wholeLoadFailed: true,
        levels: { drying_practice: drying },
        losses: lost('s-crack', 10),
      }),
    )
    expect(study([...driedFastOrSlow(30), ...failed])).toEqual(study(driedFastOrSlow(30)))
  })
})

describe('rows that cannot be', () => {
  it.each([
    ['more losses than pieces', { losses: lost('s-crack', 11) }],
    ['half a piece', { pieces: 2.5 }],
    ['more turned away and not looked at than there were', { turnedAway: 6, notLookedAt: 5 }],
  ])('refuses %s and names the firing', (_, change) => {
    expect(() => study([lot({ firing: 'F7', ...change })])).toThrow(/Firing F7/)
  })

  it('refuses a firing of two kinds', () => {
    expect(() => study([lot({ firing: 1 }), lot({ firing: 1, kind: 'glaze' })])).toThrow(
      /two kinds/,
    )
  })
})
