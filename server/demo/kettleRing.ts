import type { FiringKind } from '../shared/kinds.js'
import { DEMO_ACCOUNTS } from './accounts.js'
import type { DemoKiln, DemoLevel, DemoNetwork, DemoPerson, DemoStudio } from './types.js'

/**
 * The scenery of the first demo network: four teaching and membership studios of our own invention.
 * Names, habits and numbers are made up; what a pottery studio usually has is common practice, no source.
 */
export type Scenery = Omit<DemoNetwork, 'firings'> & { habits: Record<string, KilnHabits> }

/** How a kiln is used. */
export interface KilnHabits {
  /** Loads a week, holidays aside. */
  perWeek: number
  kinds: readonly (readonly [FiringKind, number])[]
  /** Share of the loads that are opened at 150 °C and over. */
  openedHot: number
  /** What its counter shows before the first load; null: it has none. */
  counter: number | null
}

const LISBON = { timeZone: 'Europe/Lisbon', currency: 'EUR', temperatureUnit: 'C', lengthUnit: 'mm', weekStart: 1 } as const
const BERLIN = { timeZone: 'Europe/Berlin', currency: 'EUR', temperatureUnit: 'C', lengthUnit: 'mm', weekStart: 1 } as const
const TORONTO = { timeZone: 'America/Toronto', currency: 'CAD', temperatureUnit: 'F', lengthUnit: 'in', weekStart: 0 } as const

const STUDIOS: DemoStudio[] = [
  { key: 'otter-stair', name: 'Otter Stair', ...LISBON, appearance: 'name', letter: 'A' },
  { key: 'plum-yard', name: 'Plum Yard', ...BERLIN, appearance: 'name', letter: 'B' },
  { key: 'mooring-loft', name: 'Mooring Loft', ...TORONTO, appearance: 'letter', letter: 'C' },
  { key: 'nine-buckets', name: 'Nine Buckets', ...LISBON, appearance: 'hidden', letter: 'D' },
]

function kiln(studio: string, key: string, litres: number, heat: DemoKiln['heat'], shelves: number, note: string | null = null): DemoKiln {
  return { key, studio, name: key.replace(/-/g, ' ').replace(/^\w|\s\w/g, (letter) => letter.toUpperCase()), litres, heat, shelves, note }
}

const KILNS: DemoKiln[] = [
  kiln('otter-stair', 'badger', 220, 'electric', 5),
  kiln('otter-stair', 'wren', 100, 'electric', 4, 'Top shelf runs cool.'),
  kiln('otter-stair', 'toad', 70, 'gas', 1, 'Outdoors, for raku.'),
  kiln('plum-yard', 'north', 260, 'electric', 6, 'New elements were due in spring.'),
  kiln('plum-yard', 'south', 260, 'electric', 6),
  kiln('plum-yard', 'thimble', 60, 'electric', 3, 'Tests, lustre and small loads.'),
  kiln('mooring-loft', 'anchor', 240, 'electric', 5),
  kiln('mooring-loft', 'buoy', 170, 'electric', 4),
  kiln('mooring-loft', 'gull', 90, 'electric', 4, 'Once-fired work on Fridays.'),
  kiln('nine-buckets', 'bucket-one', 160, 'electric', 4),
  kiln('nine-buckets', 'bucket-two', 120, 'electric', 4),
]

const HABITS: Record<string, KilnHabits> = {
  badger: { perWeek: 2.54, kinds: [['bisque', 5], ['glaze', 6]], openedHot: 0.03, counter: 411 },
  wren: { perWeek: 2.12, kinds: [['bisque', 3], ['glaze', 7], ['single', 0.4]], openedHot: 0.03, counter: 96 },
  toad: { perWeek: 0.53, kinds: [['raku', 1]], openedHot: 0, counter: null },
  north: { perWeek: 2.44, kinds: [['bisque', 2], ['glaze', 8]], openedHot: 0.04, counter: 1204 },
  south: { perWeek: 2.44, kinds: [['bisque', 7], ['glaze', 4]], openedHot: 0.22, counter: 877 },
  thimble: { perWeek: 1.59, kinds: [['glaze', 6], ['lustre', 3], ['bisque', 2]], openedHot: 0.05, counter: 60 },
  anchor: { perWeek: 2.44, kinds: [['bisque', 5], ['glaze', 6]], openedHot: 0.05, counter: 330 },
  buoy: { perWeek: 2.12, kinds: [['bisque', 4], ['glaze', 6]], openedHot: 0.05, counter: 318 },
  gull: { perWeek: 1.7, kinds: [['single', 4], ['glaze', 5], ['bisque', 1]], openedHot: 0.2, counter: 145 },
  'bucket-one': { perWeek: 2.01, kinds: [['bisque', 5], ['glaze', 5]], openedHot: 0.05, counter: 27 },
  'bucket-two': { perWeek: 1.8, kinds: [['bisque', 3], ['glaze', 5]], openedHot: 0.05, counter: null },
}

type Attributes = DemoLevel['attributes']
const level = (factor: string, key: string, name: string, attributes: Attributes = {}, studio: string | null = null, isReference = false): DemoLevel =>
  ({ key, factor, studio, name, isReference, attributes })

const CLAYS = [
  level('clay_body', 'buff', 'Buff stoneware', { family: 'stoneware', cone: '6' }),
  level('clay_body', 'white', 'White stoneware', { family: 'stoneware', cone: '6' }),
  level('clay_body', 'grogged', 'Grogged stoneware', { family: 'stoneware', cone: '7' }),
  level('clay_body', 'porcelain', 'Porcelain', { family: 'porcelain', cone: '7' }),
  level('clay_body', 'red', 'Red earthenware', { family: 'earthenware', cone: '04' }),
  level('clay_body', 'beach-speckle', 'Beach speckle', { family: 'stoneware', cone: '6' }, 'otter-stair'),
  level('clay_body', 'raku-body', 'Raku body', { family: 'raku', cone: '06' }, 'otter-stair'),
  level('clay_body', 'yard-blend', 'Yard blend', { family: 'stoneware', cone: '7' }, 'plum-yard'),
  level('clay_body', 'harbour-dark', 'Harbour dark', { family: 'stoneware', cone: '6' }, 'mooring-loft'),
]

const glaze = (key: string, name: string, cone: string, studio: string | null = null, foodUse: Attributes['foodUse'] = 'not-tested') =>
  level('glaze', key, name, { cone, foodUse }, studio)
const GLAZES = [
  glaze('clear-gloss', 'Clear gloss', '6', null, 'tested'),
  glaze('satin-white', 'Satin white', '6', null, 'tested'),
  glaze('tenmoku', 'Tenmoku', '6'),
  glaze('celadon', 'Celadon', '6', null, 'tested'),
  glaze('iron-red', 'Iron red', '6'),
  glaze('chun', 'Chun blue', '6'),
  glaze('shino', 'Shino', '6'),
  glaze('matt-black', 'Matt black', '6'),
  glaze('honey', 'Honey', '05'),
  glaze('low-clear', 'Low clear', '05', null, 'tested'),
  glaze('otter-green', 'Otter green', '6', 'otter-stair'),
  glaze('raku-white', 'Raku crackle white', '06', 'otter-stair', 'not-for-food'),
  glaze('raku-copper', 'Raku copper', '06', 'otter-stair', 'not-for-food'),
  glaze('stewed-plum', 'Stewed plum', '6', 'plum-yard'),
  glaze('pearl-lustre', 'Pearl lustre', '018', 'plum-yard', 'not-for-food'),
  glaze('gold-lustre', 'Gold lustre', '018', 'plum-yard', 'not-for-food'),
  glaze('fog', 'Fog', '6', 'mooring-loft'),
  glaze('bucket-seven', 'Bucket seven', '6', 'nine-buckets'),
]

const practice = (factor: string, key: string, name: string, description: string, isReference = false) =>
  level(factor, key, name, { description }, null, isReference)
const PRACTICES = [
  practice('drying_practice', 'loose-plastic', 'Under loose plastic', 'Covered for three days, then opened at one corner.', true),
  practice('drying_practice', 'open-shelf', 'Open shelf', 'Left on the rack as it is.'),
  practice('drying_practice', 'damp-cupboard', 'Damp cupboard', 'A week in the closed cupboard, then the rack.'),
  practice('drying_practice', 'by-the-fan', 'By the fan', 'On the rack that the fan blows over.'),
  practice('joining_practice', 'score-slip-wrap', 'Score, slip and wrap', 'Both sides scored and slipped, the joint wrapped overnight.', true),
  practice('joining_practice', 'score-slip', 'Score and slip', 'Scored and slipped, left unwrapped.'),
  practice('joining_practice', 'slip-only', 'Slip only', 'Pressed on with slip, not scored.'),
  practice('glazing_practice', 'wiped-dipped', 'Wiped and dipped', 'Bisque wiped with a damp sponge, dried, dipped for three seconds.', true),
  practice('glazing_practice', 'unwiped-dipped', 'Dipped unwiped', 'Straight from the shelf into the bucket.'),
  practice('glazing_practice', 'poured', 'Poured', 'Inside poured, outside poured on the rack.'),
  practice('glazing_practice', 'brushed', 'Brushed, three coats', 'Three coats, each dry before the next.'),
]

const programme = (key: string, name: string, kind: FiringKind, cone: string, description: string) =>
  level('programme', key, name, { kind, cone, description })
const PROGRAMMES = [
  programme('slow-bisque', 'Slow bisque', 'bisque', '06', 'Held at 100 °C for four hours, then 80 °C an hour to 600 °C.'),
  programme('quick-bisque', 'Quick bisque', 'bisque', '06', 'For thin, long-dried ware.'),
  programme('stoneware', 'Stoneware glaze', 'glaze', '6', 'Up to cone 6 in nine hours, kiln left to cool by itself.'),
  programme('drop-hold', 'Stoneware with drop and hold', 'glaze', '6', 'As stoneware glaze, with a hold 60 °C below the top.'),
  programme('earthenware', 'Earthenware glaze', 'glaze', '05', 'Up to cone 05 in seven hours.'),
  programme('once-fired', 'Once-fired', 'single', '6', 'Slow to 700 °C, then as stoneware glaze.'),
  programme('lustre', 'Lustre', 'lustre', '018', 'Vents open to 500 °C.'),
  programme('raku', 'Raku', 'raku', '06', 'Drawn hot by those trained for it.'),
]

const RACKS = STUDIOS.flatMap(({ key }) => [
  level('rack', `${key}-window`, 'Window rack', {}, key),
  level('rack', `${key}-door`, 'Door rack', {}, key),
  level('rack', `${key}-back`, 'Back rack', {}, key),
])

const CLASS_NAMES = [
  ['monday-wheel', 'Monday wheel', 'first-course'],
  ['tuesday-handbuilding', 'Tuesday handbuilding', 'first-course'],
  ['wednesday-lunch', 'Wednesday lunch', 'under-a-year'],
  ['wednesday-wheel', 'Wednesday wheel', 'under-a-year'],
  ['thursday-evening', 'Thursday evening', 'one-to-three'],
  ['saturday-families', 'Saturday families', 'first-course'],
  ['sunday-members', 'Sunday members', 'more'],
  ['open-benches', 'Open benches', 'one-to-three'],
  ['studio-ware', 'Studio ware', 'staff'],
] as const
const CLASSES = STUDIOS.flatMap(({ key: studio }, nth) =>
  CLASS_NAMES.filter((_, index) => (index + nth) % 4 !== 3).map(([key, name, classLevel]) =>
    level('class', `${studio}-${key}`, name, { classLevel }, studio),
  ),
)

const helper = (email: string, name: string, studio: string): DemoPerson =>
  ({ email, name, label: null, roles: [{ role: 'technician', studio }] })

export const KETTLE_RING: Scenery = {
  slug: 'kettle-ring',
  name: 'Kettle Ring',
  timeZone: 'Europe/Lisbon',
  currency: 'EUR',
  temperatureUnit: 'C',
  lengthUnit: 'mm',
  weekStart: 1,
  studios: STUDIOS,
  kilns: KILNS,
  levels: [...CLAYS, ...GLAZES, ...PRACTICES, ...PROGRAMMES, ...RACKS, ...CLASSES],
  people: [
    ...DEMO_ACCOUNTS.filter((account) => account.network === 'kettle-ring'),
    helper('pia@example.org', 'Pia', 'otter-stair'),
    helper('lasse@example.org', 'Lasse', 'plum-yard'),
    helper('wanda@example.org', 'Wanda', 'mooring-loft'),
    helper('otis@example.org', 'Otis', 'mooring-loft'),
    helper('nuno@example.org', 'Nuno', 'nine-buckets'),
  ],
  habits: HABITS,
}
