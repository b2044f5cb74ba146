/** What is compared with what: the rules of the study's screen, by definition. Made rows. */
import { describe, expect, it } from 'vitest'
import { deepFreeze } from '../statistics/deepFreeze.js'
import { randomNumbers } from '../../../server/study/randomNumbers.js'
import type { StudyRow } from '../../../server/study/index.js'
import { driedFastOrSlow, lost, lot, normalNumbers, shuffled, study } from './madeRows.js'

describe('lot factors', () => {
  it('are compared inside the firings that held both', () => {
    const alone = Array.from({ length: 20 }, (_, i) =>
      lot({
        firing: `alone ${i}`,
        levels: { drying_practice: 'fast' },
        losses: lost('s-crack', 9),
      }),
    )
    const [mixed, more] = [study(driedFastOrSlow(30)), study([...driedFastOrSlow(30), ...alone])]
    expect(more.every).toEqual(mixed.every)
  })

  it('of two levels are compared once, told from the raised side', () => {
    const { every } = study(driedFastOrSlow(30))
    expect(every?.map(({ levels, direction }) => [levels[0], direction])).toEqual([
      ['fast', 'raised'],
    ])
  })

  it('leave lots out for which they are not recorded', () => {
    const unrecorded = Array.from({ length: 30 }, (_, firing) =>
      lot({ firing, losses: lost('s-crack', 8) }),
    )
    const result = study([...driedFastOrSlow(30), ...unrecorded])
    expect(result.every).toEqual(study(driedFastOrSlow(30)).every)
    expect(result.findings[0]?.coverage).toBeCloseTo(2 / 3, 9)
  })

  it.each([
    ['fewer than 8 firings hold both', driedFastOrSlow(7)],
    [
      'a side has fewer than 50 pieces',
      driedFastOrSlow(12, (row) => ({ ...row, pieces: 4, losses: lost('s-crack', 1) })),
    ],
    [
      'fewer than 5 pieces were lost',
      driedFastOrSlow(30, (row) => ({
        ...row,
        losses: row.firing === 3 ? lost('s-crack', 2) : [],
      })),
    ],
  ])('are not compared when %s', (_, rows) => {
    expect(study(rows).comparisons).toBe(0)
  })

  it('hardly ever mixed are compared between firings and say so', () => {
    const rows = Array.from({ length: 40 }, (_, firing) =>
      lot({
        firing,
        pieces: 40,
        levels: { drying_practice: firing % 2 ? 'fast' : 'slow' },
        losses: lost('s-crack', (firing % 2 ? 10 : 2) + (firing % 3)),
      }),
    )
    expect(study(rows).findings).toEqual([
      expect.objectContaining({
        levels: ['fast'],
        comparison: 'between-firings',
        direction: 'raised',
        informativeFirings: 40,
      }),
    ])
  })

  it('with several levels on a lot count the lot for each', () => {
    const rows = Array.from({ length: 30 }, (_, firing) => [
      lot({
        firing,
        kind: 'glaze',
        levels: { glaze: ['celadon', 'tenmoku'] },
        losses: lost('crawling', 4 + (firing % 2)),
      }),
      lot({
        firing,
        kind: 'glaze',
        levels: { glaze: ['tenmoku'] },
        losses: lost('crawling', firing % 2),
      }),
      lot({
        firing,
        kind: 'glaze',
        levels: { glaze: ['shino'] },
        losses: lost('crawling', firing % 3 ? 0 : 1),
      }),
    ]).flat()
    const { every } = study(rows)
    const units = Object.fromEntries(
      every?.map((one) => [one.levels[0], [one.exposedUnits, one.unexposedUnits]]) ?? [],
    )
    expect(units).toEqual({ celadon: [300, 600], tenmoku: [600, 300] })
    expect(
      study(rows).findings[0]?.table.map(({ level, units: pieces }) => [level[0], pieces]),
    ).toEqual([
      ['tenmoku', 600],
      ['celadon', 300],
      ['shino', 300],
    ])
  })
})

describe('firing factors', () => {
  const kilns = (
    ofOther: (random: () => number) => Partial<StudyRow>,
    studio = (kiln: string) => kiln[0] ?? '',
  ) => {
    const random = randomNumbers(11)
    return ['A1', 'A2', 'B1'].flatMap((kiln) =>
      Array.from({ length: 30 }, (_, i) =>
        lot({
          firing: `${kiln}-${i}`,
          kiln,
          studio: studio(kiln),
          pieces: 60,
          ...(kiln === 'A1'
            ? { losses: lost('dunt', 6 + Math.floor(random() * 8)) }
            : ofOther(random)),
        }),
      ),
    )
  }
  const few = (random: () => number) => ({ losses: lost('dunt', Math.floor(random() * 4)) })

  it('are compared between firings of the same studio and kind', () => {
    const [finding] = study(kilns(few)).findings
    expect(finding).toMatchObject({
      factors: ['kiln'],
      levels: ['A1'],
      comparison: 'between-firings',
      exposedUnits: 1800,
      unexposedUnits: 1800,
      mixedStrata: 1,
    })
    expect(finding?.lower).toBeGreaterThan(1)
  })

  it('are not compared where every studio has one kiln', () => {
    expect(study(kilns(few, (kiln) => kiln)).comparisons).toBe(0)
  })

  it('are judged after what the mix of lots explains', () => {
    const random = randomNumbers(5)
    const rows = ['K1', 'K2'].flatMap((kiln) =>
      Array.from({ length: 60 }, (_, i) => {
        const thin = (pieces: number) =>
          lot({
            firing: `${kiln}-${i}`,
            kiln,
            pieces,
            levels: { clay_body: 'thin' },
            losses: lost('dunt', Math.round(pieces * (0.3 + random() * 0.1))),
          })
        const stout = (pieces: number) =>
          lot({
            firing: `${kiln}-${i}`,
            kiln,
            pieces,
            levels: { clay_body: 'stout' },
            losses: lost('dunt', Math.round(pieces * (0.03 + random() * 0.06))),
          })
        return kiln === 'K1' ? [thin(30), stout(10)] : [thin(10), stout(30)]
      }).flat(),
    )
    const { every } = study(rows)
    expect(every?.find(({ factors }) => factors[0] === 'clay_body')?.ratio).toBeGreaterThan(3)
    const kiln = every?.find(({ factors }) => factors[0] === 'kiln')
    // The counts alone say 1.8 times as often in K1.
    expect((kiln?.exposedEvents ?? 0) / (kiln?.unexposedEvents ?? 1)).toSatisfy(
      (crude: number) => crude > 1.5 || crude < 0.67,
    )
    expect(kiln?.ratio).toBeCloseTo(1, 0.5)
    expect(kiln?.pValue).toBeGreaterThan(0.05)
  })
})

describe('the rest of a firing', () => {
  const rest = (firing: number, more: Partial<StudyRow> = {}) =>
    lot({ firing, isRest: true, pieces: 50, ...more })
  const piece = (firing: number, drying: string, fails: boolean) =>
    rest(firing, {
      described: true,
      pieces: 1,
      levels: { drying_practice: drying },
      losses: fails ? lost('s-crack', 1) : [],
      ...(fails ? {} : { standsFor: 8 }),
    })
  const checked = Array.from({ length: 40 }, (_, firing) => [
    rest(firing, { losses: lost('s-crack', 2) }),
    piece(firing, 'fast', true),
    piece(firing, firing % 3 ? 'fast' : 'slow', true),
    piece(firing, firing % 4 ? 'slow' : 'fast', false),
    piece(firing, 'slow', false),
    piece(firing, 'slow', false),
  ]).flat()

  it('is a stratum of its own in which a checked sound piece stands for those it was picked from', () => {
    const [comparison] = study(checked).every ?? []
    expect(comparison).toMatchObject({
      levels: ['fast'],
      direction: 'raised',
      informativeFirings: 40,
    })
    expect((comparison?.exposedUnits ?? 0) + (comparison?.unexposedUnits ?? 0)).toBe(
      40 * (2 + 3 * 8),
    )
  })

  it('stays out where no sound piece was checked', () => {
    expect(study(checked.filter((row) => row.losses.length > 0)).comparisons).toBe(0)
  })

  it('counts once among the pieces', () => {
    expect(study(checked)).toMatchObject({ firings: 40, lots: 0, pieces: 40 * 50 })
  })
})

describe('the study as a whole', { timeout: 30_000 }, () => {
  const random = randomNumbers(1)
  const normal = normalNumbers(random)
  const nothing = Array.from({ length: 120 }, (_, firing) => {
    const risk = 0.04 * Math.exp(0.5 * normal())
    return Array.from({ length: 6 }, () => {
      const pieces = 4 + Math.floor(random() * 12)
      const pick = (name: string, levels: number) => `${name} ${Math.floor(random() * levels)}`
      return lot({
        firing,
        studio: `studio ${firing % 3}`,
        kiln: `kiln ${firing % 6}`,
        pieces,
        levels: {
          clay_body: pick('clay', 5),
          drying_practice: pick('drying', 4),
          forming: pick('forming', 4),
          rack: pick('rack', 6),
          class: pick('class', 8),
        },
        losses: ['s-crack', 'rim-crack', 'warping'].flatMap((fault) =>
          lost(
            fault,
            Array.from({ length: Math.floor(pieces / 4) }, random).filter((one) => one < risk * 4)
              .length,
          ),
        ),
      })
    })
  }).flat()

  it('finds next to nothing where there is nothing', () => {
    const result = study(nothing)
    expect(result.comparisons).toBeGreaterThan(80)
    expect(result.findings.length).toBeLessThanOrEqual(2)
    const small = result.every?.filter(({ pValue }) => pValue < 0.05).length ?? 0
    expect(small / result.comparisons).toBeLessThan(0.12)
  })

  it('gives the same whatever the order of rows, and does not touch its input', () => {
    const rows = deepFreeze(structuredClone(nothing))
    expect(study(shuffled(rows, 9))).toEqual(study(rows))
  })

  it('draws by the seed: another seed moves an exact p and nothing else', () => {
    const rows = driedFastOrSlow(9, (row) => ({
      ...row,
      losses: lost(
        's-crack',
        Number(row.firing) % 2 && row.levels.drying_practice === 'slow'
          ? 1
          : row.levels.drying_practice === 'fast'
            ? 2
            : 1,
      ),
    }))
    const [one] = study(rows, { seed: 1 }).every ?? []
    const [other] = study(rows, { seed: 2 }).every ?? []
    expect(one?.method).not.toBe('normal')
    expect({ ...other, pValue: one?.pValue }).toEqual(one)
  })

  it('looks at one studio alone when asked', () => {
    const mine = nothing.filter((row) => row.studio === 'studio 1')
    const { every, firings, lots } = study(nothing, { studio: 'studio 1' })
    expect({ firings, lots }).toEqual({ firings: 40, lots: 240 })
    expect(every).toEqual(study(mine).every)
  })

  it('has nothing to say of a studio that is not there, or of no rows at all', () => {
    expect(study(nothing, { studio: 'elsewhere' })).toMatchObject({
      comparisons: 0,
      findings: [],
      firings: 0,
      lots: 0,
    })
    expect(study([])).toEqual({
      comparisons: 0,
      findings: [],
      firings: 0,
      lots: 0,
      pieces: 0,
      notAtRisk: [],
      every: [],
    })
  })

  it('carries a factor of ten thousand levels without a comparison for each', () => {
    const rows = Array.from({ length: 10_000 }, (_, i) =>
      lot({
        firing: i % 500,
        levels: { class: `class ${i}` },
        losses: lost('s-crack', i % 7 === 0 ? 1 : 0),
      }),
    )
    expect(study(rows).comparisons).toBe(0)
  })
})
