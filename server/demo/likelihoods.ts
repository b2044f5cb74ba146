/** How common things are in the demo. Made up; the order of what is usual is common practice, no source. */
export type Weights<T> = readonly (readonly [T, number])[]

export const FORMING: Weights<string> = [
  ['thrown', 52],
  ['slab', 20],
  ['coil', 9],
  ['pinch', 8],
  ['cast', 5],
  ['pressed', 4],
  ['mixed', 2],
]
export const FORMS: Readonly<Record<string, Weights<string>>> = {
  thrown: [
    ['mug', 40],
    ['bowl', 32],
    ['plate', 8],
    ['bottle', 10],
    ['jar', 5],
    ['jug', 5],
  ],
  slab: [
    ['plate', 25],
    ['mug', 20],
    ['tile', 25],
    ['jar', 10],
    ['sculpture', 20],
  ],
  coil: [
    ['bottle', 50],
    ['sculpture', 30],
    ['jug', 20],
  ],
  pinch: [
    ['bowl', 70],
    ['sculpture', 30],
  ],
  cast: [
    ['mug', 60],
    ['bottle', 40],
  ],
  pressed: [
    ['plate', 60],
    ['bowl', 40],
  ],
  mixed: [
    ['sculpture', 60],
    ['jug', 40],
  ],
}
/** Share of lots with joined parts: handles, spouts and seams, but feet, lugs and sprigs too. */
export const JOINED: Readonly<Record<string, number>> = {
  mug: 0.97,
  jug: 0.97,
  jar: 0.8,
  sculpture: 0.9,
  bottle: 0.4,
  bowl: 0.35,
  plate: 0.25,
  tile: 0.1,
}
export const BUILT = new Set(['slab', 'coil'])

/** How common each level is; what is not named has a weight of 10, and a studio's own is as common as three. */
export const COMMON: Readonly<Record<string, number>> = {
  buff: 34,
  white: 26,
  grogged: 14,
  porcelain: 16,
  'beach-speckle': 14,
  'yard-blend': 16,
  'harbour-dark': 18,
  'clear-gloss': 20,
  'satin-white': 16,
  celadon: 16,
  chun: 8,
  shino: 7,
  'matt-black': 8,
  'loose-plastic': 46,
  'open-shelf': 24,
  'damp-cupboard': 14,
  'by-the-fan': 16,
  'score-slip-wrap': 48,
  'score-slip': 32,
  'slip-only': 20,
  'wiped-dipped': 44,
  'unwiped-dipped': 20,
  poured: 18,
  brushed: 18,
}
export const THICKNESS: Weights<string> = [
  ['under-5', 18],
  ['5-7', 48],
  ['8-10', 24],
  ['11-15', 8],
  ['over-15', 2],
]
export const SIZES: Weights<string> = [
  ['under-10', 34],
  ['10-20', 48],
  ['20-30', 15],
  ['over-30', 3],
]
export const DRIED: Weights<string> = [
  ['under-3', 8],
  ['3-6', 32],
  ['7-14', 44],
  ['over-14', 16],
]
export const CONDITIONS: Weights<string> = [
  ['fresh', 62],
  ['pugged', 23],
  ['reclaim', 15],
]
export const SHELVES: Weights<string> = [
  ['top', 1],
  ['middle', 1],
  ['bottom', 1],
]
export const SIDES: Weights<string> = [
  ['both', 80],
  ['inside', 14],
  ['outside', 6],
]
export const LUSTRES = ['pearl-lustre', 'gold-lustre']

/**
 * Share of lots for which a studio writes a factor down, as the product of the studio's care and
 * how much trouble the factor is. Made up; "not recorded" is the commonest value of real books.
 */
export function recordedShare(studio: string, factor: string): number {
  return Math.min(0.98, (CARE[studio] ?? 0.8) * (TROUBLE[factor] ?? 0.5))
}

const CARE: Readonly<Record<string, number>> = {
  'otter-stair': 0.96,
  'plum-yard': 0.88,
  'mooring-loft': 0.8,
  'nine-buckets': 0.66,
}
const TROUBLE: Readonly<Record<string, number>> = {
  form: 0.95,
  clay_body: 1.02,
  glaze: 1.04,
  forming: 0.98,
  drying_practice: 0.88,
  joining_practice: 0.85,
  glazing_practice: 0.8,
  class: 0.85,
  class_level: 0.8,
  clay_condition: 0.6,
  rack: 0.62,
  thickness_band: 0.4,
  size_band: 0.45,
  days_dried: 0.5,
  shelf: 0.5,
  glaze_sides: 0.55,
}
