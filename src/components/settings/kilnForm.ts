import type { KilnView } from '../../../server/contract/catalogue.js'

export interface KilnValues {
  studio: string
  name: string
  litres: number | null
  heat: 'electric' | 'gas' | 'wood' | 'other'
  shelves: number | null
  note: string | null
}

/** The form of a kiln as it is, or of a new one in a studio. */
export function kilnValues(kiln: KilnView | null, studio: string): KilnValues {
  if (!kiln) return { studio, name: '', litres: null, heat: 'electric', shelves: null, note: null }
  const { name, litres, heat, shelves, note } = kiln
  return { studio: kiln.studio.uid, name, litres, heat, shelves, note }
}

export const HEAT_OPTIONS = [
  { value: 'electric', label: 'electric' },
  { value: 'gas', label: 'gas' },
  { value: 'wood', label: 'wood' },
  { value: 'other', label: 'other' },
]
