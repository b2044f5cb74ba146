import type { LevelAttributes, LevelView } from '../../../server/contract/catalogue.js'
import { attributesOf } from '../../../server/shared/levelAttributes.js'

export interface LevelValues {
  factor: string
  studio: string | null
  name: string
  isReference: boolean
  attributes: LevelAttributes
}

/** The form of a level as it is, or of a new one. Every key that counts for the factor is there. */
export function levelValues(
  factor: string,
  level: LevelView | null,
  studio: string | null,
): LevelValues {
  const attributes = Object.fromEntries(
    attributesOf(factor).map((key) => [key, level?.attributes[key] ?? null]),
  ) as LevelAttributes
  return {
    factor,
    studio: level ? (level.studio?.uid ?? null) : studio,
    name: level?.name ?? '',
    isReference: level?.isReference ?? false,
    attributes,
  }
}

export const FAMILY_OPTIONS = [
  { value: 'earthenware', label: 'earthenware' },
  { value: 'stoneware', label: 'stoneware' },
  { value: 'porcelain', label: 'porcelain' },
  { value: 'raku', label: 'raku' },
]
export const FOOD_OPTIONS = [
  { value: 'not-tested', label: 'not tested' },
  { value: 'tested', label: 'tested by a laboratory, on our clays' },
  { value: 'not-for-food', label: 'not for food' },
]
