/**
 * The registry of factors: what may matter to a loss. Load sheet, import, filters, roll-ups and
 * study go through this list; a new factor is an entry here, never a migration. Each value of a
 * factor is a level. Three states: a level, not recorded (null), does not apply (derived).
 */
export interface Factor {
  id: string
  name: string
  /** Plural or the word of a settings page. */
  plural: string
  of: 'lot' | 'firing'
  scale: 'nominal' | 'ordered'
  /** A lot may hold several levels (glazes). */
  several?: true
  /** Fixed vocabulary seeded with every network; others are the studio's own lists. */
  fixed?: readonly { code: string; name: string }[]
  /** Applies only to ware that has glaze or joined parts. */
  applies?: 'glaze' | 'joint'
  /** Studios keep this list in settings. */
  catalogue?: true
  /** Column of `lots` that holds it; others live in `lot_levels` or `firing_levels`. */
  column?: string
  unit?: string
}

const FORMING = [
  { code: 'thrown', name: 'thrown' },
  { code: 'slab', name: 'slab' },
  { code: 'coil', name: 'coiled' },
  { code: 'pinch', name: 'pinched' },
  { code: 'cast', name: 'cast' },
  { code: 'pressed', name: 'pressed' },
  { code: 'mixed', name: 'mixed' },
] as const

/** Bands and lists are common practice, no source. */
export const FACTORS: readonly Factor[] = [
  {
    id: 'form',
    name: 'Form',
    plural: 'Forms',
    of: 'lot',
    scale: 'nominal',
    catalogue: true,
    column: 'formId',
    fixed: [
      { code: 'mug', name: 'mugs' },
      { code: 'bowl', name: 'bowls' },
      { code: 'plate', name: 'plates' },
      { code: 'bottle', name: 'bottles and vases' },
      { code: 'jar', name: 'lidded jars' },
      { code: 'jug', name: 'jugs' },
      { code: 'tile', name: 'tiles' },
      { code: 'sculpture', name: 'sculpture' },
    ],
  },
  {
    id: 'clay_body',
    name: 'Clay body',
    plural: 'Clay bodies',
    of: 'lot',
    scale: 'nominal',
    catalogue: true,
    column: 'clayBodyId',
  },
  {
    id: 'clay_condition',
    name: 'Clay condition',
    plural: 'Clay conditions',
    of: 'lot',
    scale: 'nominal',
    column: 'clayConditionId',
    fixed: [
      { code: 'fresh', name: 'fresh' },
      { code: 'pugged', name: 'pugged' },
      { code: 'reclaim', name: 'reclaim' },
    ],
  },
  {
    id: 'glaze',
    name: 'Glaze',
    plural: 'Glazes',
    of: 'lot',
    scale: 'nominal',
    several: true,
    catalogue: true,
    applies: 'glaze',
    column: 'glazeId',
  },
  {
    id: 'glaze_sides',
    name: 'Where glazed',
    plural: 'Where glazed',
    of: 'lot',
    scale: 'nominal',
    applies: 'glaze',
    fixed: [
      { code: 'both', name: 'both sides' },
      { code: 'inside', name: 'inside only' },
      { code: 'outside', name: 'outside only' },
      { code: 'none', name: 'no glaze' },
    ],
  },
  {
    id: 'forming',
    name: 'Forming',
    plural: 'Ways of forming',
    of: 'lot',
    scale: 'nominal',
    fixed: FORMING,
    column: 'formingId',
  },
  {
    id: 'drying_practice',
    name: 'Drying practice',
    plural: 'Drying practices',
    of: 'lot',
    scale: 'nominal',
    catalogue: true,
    column: 'dryingPracticeId',
  },
  {
    id: 'joining_practice',
    name: 'Joining practice',
    plural: 'Joining practices',
    of: 'lot',
    scale: 'nominal',
    catalogue: true,
    applies: 'joint',
    column: 'joiningPracticeId',
  },
  {
    id: 'glazing_practice',
    name: 'Glazing practice',
    plural: 'Glazing practices',
    of: 'lot',
    scale: 'nominal',
    catalogue: true,
    applies: 'glaze',
  },
  {
    id: 'thickness_band',
    name: 'Wall and base',
    plural: 'Wall and base bands',
    of: 'lot',
    scale: 'ordered',
    unit: 'mm',
    fixed: [
      { code: 'under-5', name: 'under 5 mm' },
      { code: '5-7', name: '5 to 7 mm' },
      { code: '8-10', name: '8 to 10 mm' },
      { code: '11-15', name: '11 to 15 mm' },
      { code: 'over-15', name: 'over 15 mm' },
    ],
  },
  {
    id: 'size_band',
    name: 'Size',
    plural: 'Sizes',
    of: 'lot',
    scale: 'ordered',
    unit: 'cm',
    fixed: [
      { code: 'under-10', name: 'under 10 cm' },
      { code: '10-20', name: '10 to 20 cm' },
      { code: '20-30', name: '20 to 30 cm' },
      { code: 'over-30', name: 'over 30 cm' },
    ],
  },
  {
    id: 'rack',
    name: 'Drying rack',
    plural: 'Drying racks',
    of: 'lot',
    scale: 'nominal',
    catalogue: true,
  },
  {
    id: 'days_dried',
    name: 'Days dried',
    plural: 'Days dried',
    of: 'lot',
    scale: 'ordered',
    unit: 'days',
    fixed: [
      { code: 'under-3', name: 'under 3 days' },
      { code: '3-6', name: '3 to 6 days' },
      { code: '7-14', name: '7 to 14 days' },
      { code: 'over-14', name: 'over 14 days' },
    ],
  },
  {
    id: 'shelf',
    name: 'Shelf',
    plural: 'Shelves',
    of: 'lot',
    scale: 'nominal',
    fixed: [
      { code: 'top', name: 'top' },
      { code: 'middle', name: 'middle' },
      { code: 'bottom', name: 'bottom' },
    ],
  },
  {
    id: 'class',
    name: 'Class',
    plural: 'Classes',
    of: 'lot',
    scale: 'nominal',
    catalogue: true,
    column: 'classId',
  },
  {
    id: 'class_level',
    name: 'Class level',
    plural: 'Class levels',
    of: 'lot',
    scale: 'ordered',
    fixed: [
      { code: 'first-course', name: 'first course' },
      { code: 'under-a-year', name: 'under a year' },
      { code: 'one-to-three', name: 'one to three years' },
      { code: 'more', name: 'more than three years' },
      { code: 'staff', name: 'staff' },
    ],
  },
  { id: 'kiln', name: 'Kiln', plural: 'Kilns', of: 'firing', scale: 'nominal' },
  {
    id: 'programme',
    name: 'Firing programme',
    plural: 'Firing programmes',
    of: 'firing',
    scale: 'nominal',
    catalogue: true,
  },
  {
    id: 'cooling',
    name: 'Cooling',
    plural: 'Ways of cooling',
    of: 'firing',
    scale: 'nominal',
    fixed: [
      { code: 'closed', name: 'closed' },
      { code: 'held', name: 'programmed hold' },
      { code: 'vents', name: 'vents open' },
      { code: 'lid', name: 'lid or door propped' },
      { code: 'fan', name: 'fan' },
    ],
  },
  {
    id: 'opening_temperature',
    name: 'Opening temperature',
    plural: 'Opening temperatures',
    of: 'firing',
    scale: 'ordered',
    unit: '°C',
    fixed: [
      { code: 'under-60', name: 'under 60 °C' },
      { code: '60-99', name: '60 to 99 °C' },
      { code: '100-149', name: '100 to 149 °C' },
      { code: '150-199', name: '150 to 199 °C' },
      { code: '200-up', name: '200 °C and over' },
    ],
  },
]

const byId = new Map(FACTORS.map((factor) => [factor.id, factor]))

/** The factor of an id, or undefined. */
export function factor(id: string): Factor | undefined {
  return byId.get(id)
}

/** Factors whose levels a person picks for a lot, in the order of the load sheet. */
export const LOT_FACTORS: readonly Factor[] = FACTORS.filter((each) => each.of === 'lot')

/** Factors recorded on the firing. `kiln` is the firing's own kiln, `opening_temperature` is derived from the reading. */
export const FIRING_FACTORS: readonly Factor[] = FACTORS.filter((each) => each.of === 'firing')

/** Band of an opening temperature in °C, as a code of the registry; null when not recorded. */
export function openingTemperatureBand(celsius: number | null): string | null {
  if (celsius === null) return null
  if (celsius < 60) return 'under-60'
  if (celsius < 100) return '60-99'
  if (celsius < 150) return '100-149'
  if (celsius < 200) return '150-199'
  return '200-up'
}
