import type { FiringKind } from '../shared/kinds.js'

/** Something that was put into the first demo network on purpose. */
export interface PlantedEffect {
  /** A fault node; every fault below it is multiplied. */
  fault: string
  /** Factors and keys of their levels; several must all hold. `kiln` is the kiln's key. */
  when: Readonly<Record<string, string>>
  ratio: number
  /** Only loads of this many months before the end and later. */
  lastMonths?: number
}

/**
 * What is true of the demo: everything that is not named here has no effect. Ratios multiply the
 * risk of a piece; they are made up.
 */
export const DEMO_TRUTH = {
  effects: [
    { fault: 'joint-crack', when: { drying_practice: 'by-the-fan' }, ratio: 2.4 },
    { fault: 'joint-crack', when: { joining_practice: 'slip-only' }, ratio: 1.9 },
    { fault: 's-crack', when: { clay_body: 'porcelain' }, ratio: 3 },
    { fault: 'crawling', when: { glazing_practice: 'unwiped-dipped' }, ratio: 2.2 },
    { fault: 'crazing', when: { glaze: 'celadon', clay_body: 'white' }, ratio: 5 },
    { fault: 'steam-blowout', when: { days_dried: 'under-3' }, ratio: 8 },
    { fault: 'cooling-dunt', when: { opening_temperature: 'hot' }, ratio: 3 },
    { fault: 'cooling-dunt', when: { kiln: 'north' }, ratio: 4.5, lastMonths: 9 },
    { fault: 'rim-crack', when: { rack: 'otter-stair-door' }, ratio: 3.5 },
  ] satisfies PlantedEffect[] as readonly PlantedEffect[],
  /** Without an effect of their own, and still raised in a crude count. */
  confounded: [
    {
      fault: 'cooling-dunt',
      when: { glaze: 'iron-red' },
      because: 'used almost only in the kiln North',
    },
  ],
  /** Without an effect, crude or not: what a study should leave alone. */
  nulls: [
    { fault: 'crawling', when: { glaze: 'tenmoku' } },
    { fault: 's-crack', when: { clay_body: 'buff' } },
    { fault: 'joint-crack', when: { drying_practice: 'damp-cupboard' } },
    { fault: 'pinholing', when: { glazing_practice: 'poured' } },
  ],
} as const

/** How the work itself changes a risk: what is not named is as everywhere. Common practice, no source. */
export const WORK_RISKS: Readonly<
  Record<
    string,
    { factor: 'forming' | 'form'; ratios: Readonly<Record<string, number>>; others: number }
  >
> = {
  's-crack': { factor: 'forming', ratios: { thrown: 1 }, others: 0.4 },
  'seam-crack': { factor: 'forming', ratios: { slab: 1, coil: 0.8 }, others: 0.3 },
  'slab-base-straight-crack': { factor: 'forming', ratios: { slab: 1, pressed: 0.6 }, others: 0 },
  'lid-gallery-crack': { factor: 'form', ratios: { jar: 1 }, others: 0 },
  warping: { factor: 'form', ratios: { plate: 2, tile: 2 }, others: 0.8 },
}

/** Risk of a piece by fault and kind of firing before any effect, and how it clumps in one firing. Made up to add to plausible losses (4 to 10 %). */
export interface BaseRisk {
  fault: string
  kinds: Partial<Record<FiringKind, number>>
  /** Intraclass correlation over firings. */
  rho: number
}

const risk = (
  fault: string,
  rho: number,
  bisque: number,
  glaze: number,
  others: Partial<Record<FiringKind, number>> = {},
): BaseRisk => ({
  fault,
  rho,
  kinds: { bisque, glaze, single: bisque * 0.8 + glaze * 0.9, raku: bisque * 0.4, ...others },
})

/* prettier-ignore */
export const BASE_RISKS: readonly BaseRisk[] = [
  risk('s-crack', 0.02, 0.014, 0.006),
  risk('attached-part-joint-crack', 0.04, 0.02, 0.009),
  risk('seam-crack', 0.04, 0.012, 0.004),
  risk('vertical-rim-crack', 0.01, 0.011, 0.004),
  risk('base-perimeter-crack', 0.03, 0.003, 0.002),
  risk('slab-base-straight-crack', 0.04, 0.014, 0.005),
  risk('lid-gallery-crack', 0.03, 0.01, 0.004),
  risk('lamination-split', 0.02, 0.002, 0.0005),
  risk('steam-blowout', 0.02, 0.004, 0, { single: 0.005 }),
  risk('crack-not-named', 0.03, 0.004, 0.003),
  risk('preheat-dunt', 0.03, 0.001, 0.001),
  risk('cooling-dunt-quartz', 0.006, 0.0015, 0.008, { raku: 0.03, single: 0.009, lustre: 0.004 }),
  risk('warping', 0.04, 0.003, 0.005),
  risk('crazing', 0.06, 0, 0.012, { raku: 0 }),
  risk('crawling', 0.05, 0, 0.014),
  risk('pinholing', 0.06, 0, 0.012),
  risk('blistering', 0.05, 0, 0.004, { lustre: 0.006 }),
  risk('running-stuck', 0.05, 0, 0.008),
  risk('shivering', 0.03, 0, 0.0015),
  risk('underfired-dry-glaze', 0.09, 0, 0.005),
  risk('glaze-too-thick', 0.03, 0, 0.002),
  risk('colour-fault', 0.05, 0, 0.003, { lustre: 0.025, raku: 0.01 }),
  risk('plucking', 0.03, 0, 0.003, { raku: 0 }),
  risk('kiln-debris', 0.03, 0, 0.002, { raku: 0 }),
  risk('refire-crack', 0.04, 0, 0.03, { single: 0 }),
  risk('handling-chip', 0.03, 0.004, 0.002, { lustre: 0.003, raku: 0.008 }),
]
