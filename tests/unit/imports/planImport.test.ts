import { describe, expect, it } from 'vitest'
import type { KnownLevel } from '../../../server/imports/levelNames.js'
import { parseLotSheet } from '../../../server/imports/lotSheet.js'
import { nameKey } from '../../../server/imports/names.js'
import { planImport } from '../../../server/imports/planImport.js'
import type { ImportDefaults } from '../../../server/imports/planImport.js'

const DEFAULTS: ImportDefaults = {
  studio: 'Studio 1',
  kiln: 'Kiln 1',
  kind: 'bisque',
  date: '2026-03-04',
  today: '2026-03-04',
}
const HEAD = 'studio,kiln,firing,kind,date,pieces'

function plan(text: string, known: { studios?: string[]; levels?: KnownLevel[] } = {}) {
  return planImport(parseLotSheet(text), { studios: [], levels: [], ...known }, DEFAULTS)
}

function known(factor: string, name: string, over: Partial<KnownLevel> = {}): KnownLevel {
  return { uid: `uid of ${name}`, factor, name, studio: null, code: null, ...over }
}

describe('the plan of an import', () => {
  it('makes one firing of the rows with one number in one kiln', () => {
    const { firings } = plan(
      `${HEAD}\nA,K1,F1,glaze,2026-03-01,4\nA,K1,F1,glaze,2026-03-01,5\nA,K2,F1,glaze,2026-03-01,6`,
    )
    expect(firings.map(({ kiln, lots }) => [kiln, lots.map(({ row }) => row.pieces)])).toEqual([
      ['K1', [4, 5]],
      ['K2', [6]],
    ])
  })

  it('makes one firing of a kiln, a day and a kind where no column numbers them', () => {
    const { firings, problems } = plan(
      'kiln,kind,date,pieces\nK1,bisque,2026-03-01,4\nK1,bisque,2026-03-01,5\nK1,glaze,2026-03-01,6\nK1,bisque,2026-03-02,7',
    )
    expect(problems).toEqual([])
    expect(firings.map(({ lots }) => lots.length)).toEqual([2, 1, 1])
  })

  it('asks for a firing or a day', () => {
    expect(plan('kiln,kind,pieces\nK1,bisque,4').problems).toMatchObject([
      { row: 1, column: 'firing' },
    ])
  })

  it('takes studio, kiln, kind and day from its defaults and says so', () => {
    const { firings, notices } = plan('firing,pieces\nF1,4')
    expect(firings).toMatchObject([
      { studio: 'Studio 1', kiln: 'Kiln 1', kind: 'bisque', date: '2026-03-04' },
    ])
    expect(notices).toHaveLength(4)
    expect(notices.join(' ')).toContain('--kind')
  })

  it('names the columns that it leaves out', () => {
    expect(plan(`${HEAD},weather\nA,K1,F1,glaze,2026-03-01,4,rain`).notices).toEqual([
      expect.stringContaining('“weather”'),
    ])
  })

  it('finds a studio and a level whatever their accents and capitals', () => {
    const { firings, levels } = plan(`${HEAD},glaze\nCAFE,K1,F1,glaze,2026-03-01,4,céladon`, {
      studios: ['Café'],
      levels: [known('glaze', 'Celadon')],
    })
    expect(firings[0]?.studio).toBe('Café')
    expect(levels).toMatchObject([{ uid: 'uid of Celadon' }])
  })

  it("takes a studio's own level before the network's of the same name", () => {
    const levels = [known('glaze', 'Fog'), known('glaze', 'Fog', { uid: 'own', studio: 'A' })]
    const sheet = `${HEAD},glaze\nA,K1,F1,glaze,2026-03-01,4,fog\nB,K1,F2,glaze,2026-03-01,4,fog`
    expect(plan(sheet, { studios: ['A', 'B'], levels }).levels.map(({ uid }) => uid)).toEqual([
      'own',
      'uid of Fog',
    ])
  })

  it('finds fixed levels by code', () => {
    const levels = [known('forming', 'coiled', { code: 'coil' })]
    expect(
      plan(`${HEAD},forming\nA,K1,F1,glaze,2026-03-01,4,coil`, { levels }).levels,
    ).toMatchObject([{ uid: 'uid of coiled' }])
  })

  it('makes a new name one new level: the network list, but racks and classes of the studio', () => {
    const sheet = `${HEAD},clay_body,rack\nA,K1,F1,glaze,2026-03-01,4,Buff,Door\nB,K1,F2,glaze,2026-03-01,4,buff,Door`
    expect(plan(sheet).levels).toEqual([
      { uid: null, factor: 'clay_body', studio: null, name: 'Buff' },
      { uid: null, factor: 'rack', studio: 'A', name: 'Door' },
      { uid: null, factor: 'rack', studio: 'B', name: 'Door' },
    ])
  })

  it.each([
    [
      'a way of forming that is none of the list',
      `${HEAD},forming\nA,K1,F1,glaze,2026-03-01,4,blown`,
      { row: 2, column: 'forming', message: expect.stringContaining('thrown') },
    ],
    ['a lot without pieces', `${HEAD}\nA,K1,F1,glaze,2026-03-01,0`, { row: 2, column: 'pieces' }],
    [
      'a day to come',
      `${HEAD}\nA,K1,F1,glaze,2026-03-05,4`,
      { row: 2, column: 'date', message: expect.stringContaining('to come') },
    ],
    [
      'a day before the year 2000',
      `${HEAD}\nA,K1,F1,glaze,1926-03-05,4`,
      { row: 2, column: 'date' },
    ],
    ['an empty studio', `${HEAD}\n,K1,F1,glaze,2026-03-01,4`, { row: 2, column: 'studio' }],
    ['an empty kind', `${HEAD}\nA,K1,F1,,2026-03-01,4`, { row: 2, column: 'kind' }],
    [
      'a cone that there is not',
      `${HEAD},cone\nA,K1,F1,glaze,2026-03-01,4,66`,
      { row: 2, column: 'cone' },
    ],
    [
      'two programmes in one firing',
      `${HEAD},programme\nA,K1,F1,glaze,2026-03-01,4,slow\nA,K1,F1,glaze,2026-03-01,4,fast`,
      { row: 3, column: 'programme', message: expect.stringContaining('slow') },
    ],
    [
      'two cones in one firing',
      `${HEAD},cone\nA,K1,F1,glaze,2026-03-01,4,6\nA,K1,F1,glaze,2026-03-01,4,7`,
      { row: 3, column: 'cone' },
    ],
  ])('refuses %s with its line and column', (_, sheet, problem) => {
    expect(plan(sheet).problems).toMatchObject([problem])
  })

  it('lists all problems, in the order of the sheet', () => {
    const { problems } = plan(
      `${HEAD},lost_dunt\nA,K1,F1,glaze,2026-03-05,4,0\nA,K1,F2,salt,2026-03-01,4,0\nA,K1,F3,glaze,2026-03-01,4,9`,
    )
    expect(problems.map(({ row }) => row)).toEqual([2, 3, 4])
  })

  it('keeps cone and opening temperature of a firing, whichever line gives them', () => {
    const { firings } = plan(
      `${HEAD},cone,opened_at\nA,K1,F1,glaze,2026-03-01,4,,\nA,K1,F1,glaze,2026-03-01,4,cone 06,87`,
    )
    expect(firings).toMatchObject([{ cone: '06', openingTemperatureC: 87 }])
  })
})

describe('nameKey', () => {
  it.each([
    ['Café', 'cafe'],
    ['  Plum   Yard ', 'plum yard'],
    ['GROẞE STUBE', 'grosse stube'],
    ['Œuvre', 'oeuvre'],
  ])('takes %s for %s', (name, key) => {
    expect(nameKey(name)).toBe(key)
  })
})
