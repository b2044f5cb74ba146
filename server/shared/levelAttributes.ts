/** What a level may say beside its name; the contract's levelAttributes has their types. */
export type LevelAttribute =
  'family' | 'cone' | 'kind' | 'classLevel' | 'startsOn' | 'endsOn' | 'description' | 'foodUse'

const PLAIN: readonly LevelAttribute[] = ['description']
const ATTRIBUTES: Readonly<Record<string, readonly LevelAttribute[]>> = {
  clay_body: ['family', 'cone', 'description'],
  glaze: ['cone', 'foodUse', 'description'],
  programme: ['kind', 'cone', 'description'],
  class: ['classLevel', 'startsOn', 'endsOn', 'description'],
}

/** The keys that count for levels of a factor, in the order of its form; others are dropped. */
export function attributesOf(factor: string): readonly LevelAttribute[] {
  return ATTRIBUTES[factor] ?? PLAIN
}

/** Factors that are practices: of each, one level a list may be the reference. */
export function isPractice(factor: string): boolean {
  return factor.endsWith('_practice')
}
