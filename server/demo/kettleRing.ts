import type { FiringKind } from '../shared/kinds.js'
import { DEMO_ACCOUNTS } from './accounts.js'
import { levelsOf } from './kettleRingLevels.js'
import type { DemoKiln, DemoNetwork, DemoPerson, DemoStudio } from './types.js'

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

const LISBON = {
  timeZone: 'Europe/Lisbon',
  currency: 'EUR',
  temperatureUnit: 'C',
  lengthUnit: 'mm',
  weekStart: 1,
} as const
const BERLIN = {
  timeZone: 'Europe/Berlin',
  currency: 'EUR',
  temperatureUnit: 'C',
  lengthUnit: 'mm',
  weekStart: 1,
} as const
const TORONTO = {
  timeZone: 'America/Toronto',
  currency: 'CAD',
  temperatureUnit: 'F',
  lengthUnit: 'in',
  weekStart: 0,
} as const

const STUDIOS: DemoStudio[] = [
  { key: 'otter-stair', name: 'Otter Stair', ...LISBON, appearance: 'name', letter: 'A' },
  { key: 'plum-yard', name: 'Plum Yard', ...BERLIN, appearance: 'name', letter: 'B' },
  { key: 'mooring-loft', name: 'Mooring Loft', ...TORONTO, appearance: 'letter', letter: 'C' },
  { key: 'nine-buckets', name: 'Nine Buckets', ...LISBON, appearance: 'hidden', letter: 'D' },
]

function kiln(
  studio: string,
  key: string,
  litres: number,
  heat: DemoKiln['heat'],
  shelves: number,
  note: string | null = null,
): DemoKiln {
  return {
    key,
    studio,
    name: key.replace(/-/g, ' ').replace(/^\w|\s\w/g, (letter) => letter.toUpperCase()),
    litres,
    heat,
    shelves,
    note,
  }
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
  badger: {
    perWeek: 2.54,
    kinds: [
      ['bisque', 5],
      ['glaze', 6],
    ],
    openedHot: 0.03,
    counter: 411,
  },
  wren: {
    perWeek: 2.12,
    kinds: [
      ['bisque', 3],
      ['glaze', 7],
      ['single', 0.4],
    ],
    openedHot: 0.03,
    counter: 96,
  },
  toad: { perWeek: 0.53, kinds: [['raku', 1]], openedHot: 0, counter: null },
  north: {
    perWeek: 2.44,
    kinds: [
      ['bisque', 2],
      ['glaze', 8],
    ],
    openedHot: 0.04,
    counter: 1204,
  },
  south: {
    perWeek: 2.44,
    kinds: [
      ['bisque', 7],
      ['glaze', 4],
    ],
    openedHot: 0.22,
    counter: 877,
  },
  thimble: {
    perWeek: 1.59,
    kinds: [
      ['glaze', 6],
      ['lustre', 3],
      ['bisque', 2],
    ],
    openedHot: 0.05,
    counter: 60,
  },
  anchor: {
    perWeek: 2.44,
    kinds: [
      ['bisque', 5],
      ['glaze', 6],
    ],
    openedHot: 0.05,
    counter: 330,
  },
  buoy: {
    perWeek: 2.12,
    kinds: [
      ['bisque', 4],
      ['glaze', 6],
    ],
    openedHot: 0.05,
    counter: 318,
  },
  gull: {
    perWeek: 1.7,
    kinds: [
      ['single', 4],
      ['glaze', 5],
      ['bisque', 1],
    ],
    openedHot: 0.2,
    counter: 145,
  },
  'bucket-one': {
    perWeek: 2.01,
    kinds: [
      ['bisque', 5],
      ['glaze', 5],
    ],
    openedHot: 0.05,
    counter: 27,
  },
  'bucket-two': {
    perWeek: 1.8,
    kinds: [
      ['bisque', 3],
      ['glaze', 5],
    ],
    openedHot: 0.05,
    counter: null,
  },
}

const helper = (email: string, name: string, studio: string): DemoPerson => ({
  email,
  name,
  label: null,
  roles: [{ role: 'technician', studio }],
})

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
  levels: levelsOf(STUDIOS.map(({ key }) => key)),
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
