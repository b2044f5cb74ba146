/** How lot sheets are read. Column names are common words of such sheets, no source; aliases of faults: fault-rules.json. */
import { describe, expect, it } from 'vitest'
import { parseLotSheet } from '../../../server/imports/lotSheet.js'
import { studyOfLotSheet } from '../../../server/imports/lotSheetStudy.js'

const head = 'studio,kiln,firing_id,firing_kind,unloaded_on,units'
const start = 'North,K1,F1,bisque,2025-03-31,12'
const one = (columns: string, cells: string) =>
  parseLotSheet(`${head},${columns}\n${start},${cells}`)
const first = (columns: string, cells: string) => {
  const { rows, problems } = one(columns, cells)
  expect(problems).toEqual([])
  return rows[0]
}
const complaint = (columns: string, cells: string) => one(columns, cells).problems

describe('a lot sheet', () => {
  it('is read into lots with their line', () => {
    expect(parseLotSheet(`${head}\n${start}`).rows).toEqual([
      {
        line: 2,
        studio: 'North',
        kiln: 'K1',
        firing: 'F1',
        kind: 'bisque',
        date: '2025-03-31',
        cone: null,
        pieces: 12,
        turnedAway: 0,
        notLookedAt: 0,
        refireCount: 0,
        levels: {},
        firingLevels: {},
        openingTemperatureC: null,
        losses: [],
        others: {},
      },
    ])
  })

  it.each([
    ['in capitals, with blanks', 'Kiln ,Firing,KIND,Pieces\nK1,F1,Bisque,12'],
    ['separated by semicolons', 'kiln;firing;kind;pieces\nK1;F1;bisque;12'],
    ['separated by tabs', 'kiln\tfiring\tkind\tpieces\nK1\tF1\tbisque\t12'],
    [
      'with a byte order mark and Windows line ends',
      '\ufeffkiln,firing,kind,pieces\r\nK1,F1,bisque,12\r\n',
    ],
    ['in another order', 'pieces,kind,firing,kiln\n12,bisque,F1,K1'],
    ['with empty lines', 'kiln,firing,kind,pieces\n\nK1,F1,bisque,12\n,,,\n'],
  ])('may be %s', (_, text) => {
    const { rows, problems } = parseLotSheet(text)
    expect(problems).toEqual([])
    expect(rows).toEqual([
      expect.objectContaining({ kiln: 'K1', firing: 'F1', kind: 'bisque', pieces: 12 }),
    ])
  })

  it('takes fixed levels by code or name and keeps other names as written', () => {
    const row = first(
      'forming,clay_body,drying,shelf,program',
      'Coiled,White Stoneware,,TOP,cone 6 slow',
    )
    expect(row?.levels).toEqual({
      forming: 'coil',
      clay_body: 'White Stoneware',
      drying_practice: null,
      shelf: 'top',
    })
    expect(row?.firingLevels).toEqual({ programme: 'cone 6 slow' })
  })

  it.each(['celadon|tenmoku', 'celadon + tenmoku', 'celadon | tenmoku | celadon'])(
    'takes %s for two glazes',
    (cell) => {
      expect(first('glaze', cell)?.levels.glaze).toEqual(['celadon', 'tenmoku'])
    },
  )

  it.each(['', '-', '?', 'n/a', 'NA'])('takes "%s" for not recorded', (cell) => {
    expect(first('clay_body', cell)?.levels.clay_body).toBeNull()
  })

  it('puts an opening temperature into its band', () => {
    expect(first('opening_temperature', '120')?.firingLevels.opening_temperature).toBe('100-149')
  })

  it.each([
    ['once-fired', 'single'],
    ['Glost', 'glaze'],
    ['biscuit', 'bisque'],
    ['luster', 'lustre'],
    ['raku firing', 'raku'],
  ])('knows %s as a kind of firing', (cell, kind) => {
    expect(parseLotSheet(`firing,kind,pieces\nF1,${cell},3`).rows[0]?.kind).toBe(kind)
  })
})

describe('losses', () => {
  it.each([
    ['lost_dunting', 'dunt'],
    ['lost_s_crack', 's-crack'],
    ['S-crack', 's-crack'],
    ['Crazing lost', 'crazing'],
    ['n_handle_off', 'attached-part-joint-crack'],
    ['lost_lug', 'lug-sprig-detach'],
    ['lost_star-base-crack', 'star-base-crack'],
  ])('of the column %s are %s', (header, fault) => {
    expect(first(header, '2')?.losses).toEqual([{ fault, pieces: 2 }])
  })

  it('of two columns that name one fault are added up', () => {
    expect(first('lost_dunt,lost_dunting', '2,1')?.losses).toEqual([{ fault: 'dunt', pieces: 3 }])
  })

  it('without a name are of no fault that we know', () => {
    expect(first('lost', '3')?.losses).toEqual([{ fault: 'other', pieces: 3 }])
  })

  it('in all hold the named ones', () => {
    expect(first('lost_dunt,lost_total', '2,3')?.losses).toEqual([
      { fault: 'dunt', pieces: 2 },
      { fault: 'other', pieces: 1 },
    ])
  })
})

describe('what is wrong with a sheet', () => {
  it.each([
    [
      'pieces that are no whole number',
      'firing,pieces\nF1,2.5',
      { row: 2, column: 'pieces', message: /“2\.5” is not a whole number/ },
    ],
    ['no pieces', 'firing,pieces\nF1,', { row: 2, column: 'pieces', message: /How many pieces/ }],
    ['negative pieces', 'firing,pieces\nF1,-3', { row: 2, column: 'pieces', message: /“-3”/ }],
    [
      'no firing',
      'firing,pieces\n,3',
      { row: 2, column: 'firing', message: /belongs to a firing/ },
    ],
    [
      'an unknown kind',
      'firing,kind,pieces\nF1,salt,3',
      { row: 2, column: 'kind', message: /“salt” is no kind of firing/ },
    ],
    [
      'no such day',
      'firing,date,pieces\nF1,2025-02-30,3',
      { row: 2, column: 'date', message: /“2025-02-30” is no day/ },
    ],
    [
      'another way to write days',
      'firing,date,pieces\nF1,31.3.2025,3',
      { row: 2, column: 'date', message: /2025-03-31/ },
    ],
    [
      'more lost than there were',
      'firing,pieces,lost_dunt,lost_crazing\nF1,3,2,2',
      { row: 2, column: 'lost_crazing', message: /4 of 3 pieces/ },
    ],
    [
      'lost pieces that were never fired',
      'firing,pieces,turned_away,lost\nF1,3,2,2',
      { row: 2, column: 'lost', message: /2 of 1 pieces/ },
    ],
    [
      'a total below its parts',
      'firing,pieces,lost_dunt,lost\nF1,9,4,2',
      { row: 2, column: 'lost', message: /less than the 4/ },
    ],
    [
      'a line that is too short',
      'firing,pieces,kind\nF1,3',
      { row: 2, column: '', message: /2 cells, the header 3/ },
    ],
    [
      'a firing of two kinds',
      'firing,pieces,kind\nF1,3,bisque\nF1,4,glaze',
      { row: 3, column: 'kind', message: /“bisque” here in line 2/ },
    ],
    [
      'no column of pieces',
      'firing,kind\nF1,bisque',
      { row: 1, column: 'pieces', message: /No column gives the number of pieces/ },
    ],
    [
      'an unknown fault',
      'firing,pieces,lost_sparkle\nF1,3,1',
      { row: 1, column: 'lost_sparkle', message: /names no fault/ },
    ],
    [
      'two columns that mean the same',
      'firing,units,pieces\nF1,3,3',
      { row: 1, column: 'pieces', message: /“units” and “pieces” mean the same/ },
    ],
    [
      'an open quote',
      'firing,pieces\n"F1,3',
      { row: 2, column: '', message: /cannot be read as CSV/ },
    ],
    ['nothing', '', { row: 1, column: '', message: /empty/ }],
  ])('is said with line and column: %s', (_, text, { row, column, message }) => {
    expect(parseLotSheet(text).problems).toEqual([
      { row, column, message: expect.stringMatching(message) },
    ])
  })

  it('is said all at once, and the good lines are kept', () => {
    const { rows, problems } = parseLotSheet('firing,pieces\nF1,x\nF2,3\nF3,y')
    expect(problems.map(({ row }) => row)).toEqual([2, 4])
    expect(rows.map(({ firing }) => firing)).toEqual(['F2'])
  })

  it('includes columns that the caller needs', () => {
    const { problems } = parseLotSheet('firing,pieces\nF1,3', { required: ['kind', 'date'] })
    expect(problems.map(({ column }) => column)).toEqual(['kind', 'date'])
  })

  it('does not include columns that are nothing we know', () => {
    expect(complaint('weather', 'wet')).toEqual([])
    expect(one('weather', 'wet').columns.at(-1)).toEqual({ header: 'weather', is: 'unknown' })
  })

  it('allows the same firing number in another kiln', () => {
    expect(parseLotSheet('kiln,firing,kind,pieces\nK1,1,bisque,3\nK2,1,glaze,3').problems).toEqual(
      [],
    )
  })
})

describe('a lot sheet for the study', () => {
  it('turns unknown columns into lot factors', () => {
    const { factors, rows } = studyOfLotSheet(one('weather', 'wet'))
    expect(factors.at(-1)).toEqual({ id: 'weather', of: 'lot' })
    expect(rows[0]?.levels).toEqual({ weather: 'wet' })
  })

  it('tells kilns of one name in two studios apart', () => {
    const { rows } = studyOfLotSheet(
      parseLotSheet('studio,kiln,firing,pieces\nNorth,K1,1,3\nSouth,K1,1,3\nSouth,K2,2,3'),
    )
    expect(rows.map(({ kiln }) => kiln)).toEqual(['North / K1', 'South / K1', 'K2'])
    expect(new Set(rows.map(({ firing }) => firing)).size).toBe(3)
  })
})
