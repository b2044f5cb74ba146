import type { LevelView } from '../../../server/contract/catalogue.js'
import { attributesOf, isPractice } from '../../../server/shared/levelAttributes.js'
import { factor as factorOf } from '../../../server/shared/factors.js'
import { FIRING_KIND_NAMES } from '../../../server/shared/kinds.js'
import { formatCount } from '../../../server/shared/plural.js'
import type { Column } from '../ui/types'
import { FOOD_OPTIONS } from './levelForm'

type Attribute = ReturnType<typeof attributesOf>[number]

const ATTRIBUTE_COLUMNS: Readonly<Partial<Record<Attribute, Column<LevelView>>>> = {
  family: { key: 'family', label: 'family', text: ({ attributes }) => attributes.family ?? '' },
  kind: {
    key: 'kind',
    label: 'firing',
    text: ({ attributes }) => (attributes.kind ? FIRING_KIND_NAMES[attributes.kind] : 'any'),
  },
  cone: { key: 'cone', label: 'cone', text: ({ attributes }) => attributes.cone ?? '' },
  foodUse: {
    key: 'foodUse',
    label: 'with food',
    text: ({ attributes }) =>
      FOOD_OPTIONS.find(({ value }) => value === attributes.foodUse)?.label ?? 'not recorded',
  },
  classLevel: {
    key: 'classLevel',
    label: 'level',
    text: ({ attributes }) =>
      factorOf('class_level')?.fixed?.find(({ code }) => code === attributes.classLevel)?.name ??
      'not recorded',
  },
  description: {
    key: 'description',
    label: 'in a few words',
    text: ({ attributes }) => attributes.description ?? '',
  },
}

/** Columns of a list of the settings: name, what counts for its factor, whose it is, how often it is named. */
export function levelColumns(factor: string): Column<LevelView>[] {
  return [
    {
      key: 'name',
      label: 'name',
      phone: 'title',
      text: (row) => (isPractice(factor) && row.isReference ? `${row.name} (reference)` : row.name),
    },
    ...attributesOf(factor).flatMap((key) => ATTRIBUTE_COLUMNS[key] ?? []),
    { key: 'studio', label: 'list of', text: ({ studio }) => studio?.name ?? 'all studios' },
    { key: 'uses', label: 'named', align: 'end', text: ({ uses }) => formatCount(uses) },
  ]
}
