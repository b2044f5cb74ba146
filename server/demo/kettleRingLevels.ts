import type { FiringKind } from '../shared/kinds.js'
import type { DemoLevel } from './types.js'

type Attributes = DemoLevel['attributes']
const level = (
  factor: string,
  key: string,
  name: string,
  attributes: Attributes = {},
  studio: string | null = null,
  isReference = false,
): DemoLevel => ({ key, factor, studio, name, isReference, attributes })

const CLAYS = [
  level('clay_body', 'buff', 'Buff stoneware', { family: 'stoneware', cone: '6' }),
  level('clay_body', 'white', 'White stoneware', { family: 'stoneware', cone: '6' }),
  level('clay_body', 'grogged', 'Grogged stoneware', { family: 'stoneware', cone: '7' }),
  level('clay_body', 'porcelain', 'Porcelain', { family: 'porcelain', cone: '7' }),
  level('clay_body', 'red', 'Red earthenware', { family: 'earthenware', cone: '04' }),
  level(
    'clay_body',
    'beach-speckle',
    'Beach speckle',
    { family: 'stoneware', cone: '6' },
    'otter-stair',
  ),
  level('clay_body', 'raku-body', 'Raku body', { family: 'raku', cone: '06' }, 'otter-stair'),
  level('clay_body', 'yard-blend', 'Yard blend', { family: 'stoneware', cone: '7' }, 'plum-yard'),
  level(
    'clay_body',
    'harbour-dark',
    'Harbour dark',
    { family: 'stoneware', cone: '6' },
    'mooring-loft',
  ),
]

const glaze = (
  key: string,
  name: string,
  cone: string,
  studio: string | null = null,
  foodUse: Attributes['foodUse'] = 'not-tested',
) => level('glaze', key, name, { cone, foodUse }, studio)
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

const practice = (
  factor: string,
  key: string,
  name: string,
  description: string,
  isReference = false,
) => level(factor, key, name, { description }, null, isReference)
const PRACTICES = [
  practice(
    'drying_practice',
    'loose-plastic',
    'Under loose plastic',
    'Covered for three days, then opened at one corner.',
    true,
  ),
  practice('drying_practice', 'open-shelf', 'Open shelf', 'Left on the rack as it is.'),
  practice(
    'drying_practice',
    'damp-cupboard',
    'Damp cupboard',
    'A week in the closed cupboard, then the rack.',
  ),
  practice('drying_practice', 'by-the-fan', 'By the fan', 'On the rack that the fan blows over.'),
  practice(
    'joining_practice',
    'score-slip-wrap',
    'Score, slip and wrap',
    'Both sides scored and slipped, the joint wrapped overnight.',
    true,
  ),
  practice(
    'joining_practice',
    'score-slip',
    'Score and slip',
    'Scored and slipped, left unwrapped.',
  ),
  practice('joining_practice', 'slip-only', 'Slip only', 'Pressed on with slip, not scored.'),
  practice(
    'glazing_practice',
    'wiped-dipped',
    'Wiped and dipped',
    'Bisque wiped with a damp sponge, dried, dipped for three seconds.',
    true,
  ),
  practice(
    'glazing_practice',
    'unwiped-dipped',
    'Dipped unwiped',
    'Straight from the shelf into the bucket.',
  ),
  practice('glazing_practice', 'poured', 'Poured', 'Inside poured, outside poured on the rack.'),
  practice(
    'glazing_practice',
    'brushed',
    'Brushed, three coats',
    'Three coats, each dry before the next.',
  ),
]

const programme = (
  key: string,
  name: string,
  kind: FiringKind,
  cone: string,
  description: string,
) => level('programme', key, name, { kind, cone, description })
const PROGRAMMES = [
  programme(
    'slow-bisque',
    'Slow bisque',
    'bisque',
    '06',
    'Held at 100 °C for four hours, then 80 °C an hour to 600 °C.',
  ),
  programme('quick-bisque', 'Quick bisque', 'bisque', '06', 'For thin, long-dried ware.'),
  programme(
    'stoneware',
    'Stoneware glaze',
    'glaze',
    '6',
    'Up to cone 6 in nine hours, kiln left to cool by itself.',
  ),
  programme(
    'drop-hold',
    'Stoneware with drop and hold',
    'glaze',
    '6',
    'As stoneware glaze, with a hold 60 °C below the top.',
  ),
  programme('earthenware', 'Earthenware glaze', 'glaze', '05', 'Up to cone 05 in seven hours.'),
  programme('once-fired', 'Once-fired', 'single', '6', 'Slow to 700 °C, then as stoneware glaze.'),
  programme('lustre', 'Lustre', 'lustre', '018', 'Vents open to 500 °C.'),
  programme('raku', 'Raku', 'raku', '06', 'Drawn hot by those trained for it.'),
]

const racksOf = (key: string): DemoLevel[] => [
  level('rack', `${key}-window`, 'Window rack', {}, key),
  level('rack', `${key}-door`, 'Door rack', {}, key),
  level('rack', `${key}-back`, 'Back rack', {}, key),
]

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
/** Each studio leaves out every fourth class, another one each. */
const classesOf = (studio: string, nth: number): DemoLevel[] =>
  CLASS_NAMES.filter((_, index) => (index + nth) % 4 !== 3).map(([key, name, classLevel]) =>
    level('class', `${studio}-${key}`, name, { classLevel }, studio),
  )

/** The lists of the network, and racks and classes of each of these studios. */
export function levelsOf(studios: readonly string[]): DemoLevel[] {
  return [
    ...CLAYS,
    ...GLAZES,
    ...PRACTICES,
    ...PROGRAMMES,
    ...studios.flatMap(racksOf),
    ...studios.flatMap(classesOf),
  ]
}
