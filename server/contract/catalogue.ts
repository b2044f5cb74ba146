import { z } from 'zod'
import { abilities, appearance, currency, day, ref, timeZone, uid } from './common.js'
import { FACTORS } from '../shared/factors.js'
import { FIRING_KINDS, CONES } from '../shared/kinds.js'

const name = (max: number) =>
  z.string().trim().min(1, 'Enter a name.').max(max, `At most ${max} characters.`)
const units = {
  temperatureUnit: z.enum(['C', 'F']),
  lengthUnit: z.enum(['mm', 'in']),
  weekStart: z.int().min(0).max(6),
}

/** Studio as those who may read its firings see it. */
export const studio = z.object({
  uid,
  slug: z.string(),
  name: z.string(),
  timeZone: z.string(),
  currency: z.string(),
  ...units,
  appearance,
  letter: z.string().nullable(),
  kilns: z.number(),
  archivedAt: z.string().nullable(),
  abilities,
})
export type StudioView = z.infer<typeof studio>
export const studiosOutput = z.object({ rows: z.array(studio) })
/** POST /studios, PATCH /studios/:studio */
export const studioInput = z.object({
  name: name(120),
  timeZone,
  currency,
  ...units,
  appearance,
})

export const HEATS = ['electric', 'gas', 'wood', 'other'] as const
export const kiln = z.object({
  uid,
  name: z.string(),
  studio: ref,
  litres: z.number().nullable(),
  heat: z.enum(HEATS),
  shelves: z.number().nullable(),
  note: z.string().nullable(),
  archivedAt: z.string().nullable(),
  abilities,
})
export type KilnView = z.infer<typeof kiln>
export const kilnsOutput = z.object({ rows: z.array(kiln) })
/** POST /kilns, PATCH /kilns/:kiln (studio cannot change) */
export const kilnInput = z.object({
  studio: uid,
  name: name(80),
  litres: z.int().min(1).max(50_000).nullable(),
  heat: z.enum(HEATS),
  shelves: z.int().min(1).max(100).nullable(),
  note: z.string().trim().max(500).nullable(),
})

export const CLAY_FAMILIES = ['earthenware', 'stoneware', 'porcelain', 'raku'] as const
export const CLASS_LEVELS = [
  'first-course',
  'under-a-year',
  'one-to-three',
  'more',
  'staff',
] as const

/** What a level says beside its name; which keys count depends on its factor. */
export const levelAttributes = z.object({
  /** clay_body */
  family: z.enum(CLAY_FAMILIES).nullable().optional(),
  /** clay_body, glaze, programme */
  cone: z.enum(CONES).nullable().optional(),
  /** programme */
  kind: z.enum(FIRING_KINDS).nullable().optional(),
  /** class */
  classLevel: z.enum(CLASS_LEVELS).nullable().optional(),
  startsOn: day.nullable().optional(),
  endsOn: day.nullable().optional(),
  /** practices, racks, programmes */
  description: z.string().trim().max(1000).nullable().optional(),
  /** glaze: tested for use with food, as the studio says; we certify nothing */
  foodUse: z.enum(['not-tested', 'tested', 'not-for-food']).nullable().optional(),
})
export type LevelAttributes = z.output<typeof levelAttributes>

export { attributesOf, isPractice } from '../shared/levelAttributes.js'

export const level = z.object({
  uid,
  factor: z.string(),
  /** null: the network's own list, there for every studio */
  studio: ref.nullable(),
  code: z.string().nullable(),
  name: z.string(),
  isReference: z.boolean(),
  attributes: levelAttributes,
  archivedAt: z.string().nullable(),
  /** Lots or firings that name it. */
  uses: z.number(),
  abilities,
})
export type LevelView = z.infer<typeof level>

/** GET /levels?factor=a,b&archived=true: the settings lists; with `archived` the archived ones too */
export const levelsInput = z.object({
  factor: z.string().transform((list) => list.split(',').filter(Boolean)),
  archived: z.enum(['true', 'false']).default('false'),
})
export const levelsOutput = z.object({ rows: z.array(level) })
/** POST /levels, PATCH /levels/:level (factor and studio cannot change) */
export const levelInput = z.object({
  factor: z.string().refine((id) => FACTORS.some((each) => each.id === id && each.catalogue), {
    message: 'Not a list that a studio keeps.',
  }),
  studio: uid.nullable(),
  name: name(120),
  isReference: z.boolean().default(false),
  attributes: levelAttributes,
})

/** GET /catalogue: all that the count sheet and the filters need, in one answer. */
export const catalogueLevel = z.object({
  uid,
  factor: z.string(),
  studio: uid.nullable(),
  code: z.string().nullable(),
  name: z.string(),
  attributes: levelAttributes,
  archived: z.boolean(),
})
export const catalogueOutput = z.object({
  studios: z.array(
    z.object({
      uid,
      slug: z.string(),
      name: z.string(),
      timeZone: z.string(),
      temperatureUnit: z.enum(['C', 'F']),
      archived: z.boolean(),
      abilities,
    }),
  ),
  kilns: z.array(
    z.object({
      uid,
      name: z.string(),
      studio: uid,
      litres: z.number().nullable(),
      heat: z.enum(HEATS),
      /** The next number of the kiln's own counter, from the last one recorded. */
      nextNumber: z.number().nullable(),
      archived: z.boolean(),
    }),
  ),
  levels: z.array(catalogueLevel),
})
export type Catalogue = z.infer<typeof catalogueOutput>
export type CatalogueLevel = z.infer<typeof catalogueLevel>

/** PUT /studios/:studio/archived and the like: archive or bring back. */
export const archivedInput = z.object({ archived: z.boolean() })
