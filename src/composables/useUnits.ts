import { computed } from 'vue'
import { formatCount } from '../../server/shared/plural.js'
import { usePreferencesStore } from '../stores/preferences'
import { useNetwork } from './useNetwork'

const DAY: Intl.DateTimeFormatOptions = { day: 'numeric', month: 'short', year: 'numeric' }
const TIME: Intl.DateTimeFormatOptions = { hour: '2-digit', minute: '2-digit' }

/** "3 May 2026" of a calendar day, which has no zone. */
export function formatDay(day: string): string {
  return new Intl.DateTimeFormat('en-GB', { ...DAY, timeZone: 'UTC' }).format(
    new Date(`${day}T00:00:00Z`),
  )
}

/** "May 2026" of a month (YYYY-MM). */
export function formatMonth(month: string, length: 'short' | 'long' = 'long'): string {
  return new Intl.DateTimeFormat('en-GB', {
    month: length,
    year: 'numeric',
    timeZone: 'UTC',
  }).format(new Date(`${month}-01T00:00:00Z`))
}

/** "3 May 2026, 14:05" of an instant in a zone. */
export function formatMoment(instant: string, timeZone: string): string {
  return new Intl.DateTimeFormat('en-GB', { ...DAY, ...TIME, timeZone }).format(new Date(instant))
}

/** "7.4 %", with a decimal up to 10 % and where the share is not whole; null is "–". */
export function formatPercent(share: number | null): string {
  if (share === null) return '–'
  return `${new Intl.NumberFormat('en-GB', { minimumFractionDigits: 1, maximumFractionDigits: 1 }).format(share * 100)} %`
}

/** Numbers, dates and temperatures as this person reads them: their own choice, else the network's. */
export function useUnits() {
  const preferences = usePreferencesStore()
  const network = useNetwork()
  const temperatureUnit = computed(
    () => preferences.temperatureUnit ?? network.value?.temperatureUnit ?? 'C',
  )
  const timeZone = computed(() => network.value?.timeZone ?? 'UTC')

  return {
    temperatureUnit,
    timeZone,
    /** "84 °C" or "183 °F". */
    temperature: (celsius: number): string =>
      `${formatCount(temperatureUnit.value === 'F' ? Math.round((celsius * 9) / 5 + 32) : celsius)} °${temperatureUnit.value}`,
    /** A temperature as typed, in °C and whole. */
    toCelsius: (typed: number): number =>
      Math.round(temperatureUnit.value === 'F' ? ((typed - 32) * 5) / 9 : typed),
    fromCelsius: (celsius: number): number =>
      Math.round(temperatureUnit.value === 'F' ? (celsius * 9) / 5 + 32 : celsius),
    date: formatDay,
    month: formatMonth,
    dateTime: (instant: string, zone: string = timeZone.value): string =>
      formatMoment(instant, zone),
    number: formatCount,
    percent: formatPercent,
  }
}
