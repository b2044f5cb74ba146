import type { StudioView } from '../../../server/contract/catalogue.js'

export interface StudioValues {
  name: string
  timeZone: string
  currency: string
  temperatureUnit: 'C' | 'F'
  lengthUnit: 'mm' | 'in'
  weekStart: number
  appearance: 'name' | 'letter' | 'hidden'
}

/** The form of a studio as it is; a new one starts with the zone and units of this browser's network. */
export function studioValues(studio: StudioView | null, timeZone: string): StudioValues {
  if (!studio)
    return {
      name: '',
      timeZone,
      currency: 'EUR',
      temperatureUnit: 'C',
      lengthUnit: 'mm',
      weekStart: 1,
      appearance: 'name',
    }
  const { name, currency, temperatureUnit, lengthUnit, weekStart, appearance } = studio
  return {
    name,
    timeZone: studio.timeZone,
    currency,
    temperatureUnit,
    lengthUnit,
    weekStart,
    appearance,
  }
}

/** Every zone of the browser's own list (IANA names), UTC first. */
export const ZONE_OPTIONS = [
  'UTC',
  ...Intl.supportedValuesOf('timeZone').filter((zone) => zone !== 'UTC'),
].map((zone) => ({ value: zone, label: zone.replaceAll('_', ' ') }))
export const WEEK_OPTIONS = [
  { value: '1', label: 'Monday' },
  { value: '0', label: 'Sunday' },
  { value: '6', label: 'Saturday' },
]
export const APPEARANCE_OPTIONS = [
  { value: 'name', label: 'by name' },
  { value: 'letter', label: 'as a letter' },
  { value: 'hidden', label: 'not at all' },
]
