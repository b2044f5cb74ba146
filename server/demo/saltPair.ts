import { DEMO_ACCOUNTS } from './accounts.js'
import type { Scenery } from './kettleRing.js'
import { KETTLE_RING } from './kettleRing.js'

const BRISTOL = {
  timeZone: 'Europe/London',
  currency: 'GBP',
  temperatureUnit: 'C',
  lengthUnit: 'mm',
  weekStart: 1,
} as const

/** Lists that any network might have; the studios' own ones are Kettle Ring's alone. */
const SHARED_LEVELS = KETTLE_RING.levels.filter((level) => level.studio === null)

/** The second demo network: two small studios, there so that the wall between networks can be seen. */
export const SALT_PAIR: Scenery = {
  slug: 'salt-pair',
  name: 'Salt Pair',
  ...BRISTOL,
  studios: [
    { key: 'low-tide', name: 'Low Tide Room', ...BRISTOL, appearance: 'name', letter: 'A' },
    { key: 'high-tide', name: 'High Tide Room', ...BRISTOL, appearance: 'name', letter: 'B' },
  ],
  kilns: [
    {
      key: 'limpet',
      studio: 'low-tide',
      name: 'Limpet',
      litres: 140,
      heat: 'electric',
      shelves: 4,
      note: null,
    },
    {
      key: 'whelk',
      studio: 'high-tide',
      name: 'Whelk',
      litres: 180,
      heat: 'electric',
      shelves: 5,
      note: null,
    },
  ],
  levels: [
    ...SHARED_LEVELS,
    ...['low-tide', 'high-tide'].flatMap((studio) => [
      {
        key: `${studio}-window`,
        factor: 'rack',
        studio,
        name: 'Window rack',
        isReference: false,
        attributes: {},
      },
      {
        key: `${studio}-evening`,
        factor: 'class',
        studio,
        name: 'Evening class',
        isReference: false,
        attributes: { classLevel: 'first-course' as const },
      },
    ]),
  ],
  people: [...DEMO_ACCOUNTS.filter((account) => account.network === 'salt-pair')],
  habits: {
    limpet: {
      perWeek: 1.2,
      kinds: [
        ['bisque', 4],
        ['glaze', 5],
      ],
      openedHot: 0.05,
      counter: 12,
    },
    whelk: {
      perWeek: 1.2,
      kinds: [
        ['bisque', 4],
        ['glaze', 5],
      ],
      openedHot: 0.05,
      counter: 204,
    },
  },
}
