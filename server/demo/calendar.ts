import { instantOf as instantOfClock } from '../shared/zonedTime.js'

export { addDays } from '../shared/zonedTime.js'

const DAY = 86_400_000
const noons = new Map<string, number>()

/** Whole days from one calendar day to another. */
export function daysBetween(from: string, to: string): number {
  return (Date.parse(`${to}T00:00:00Z`) - Date.parse(`${from}T00:00:00Z`)) / DAY
}

/**
 * The instant (ms) at which the zone's clock shows so many minutes of that day (over 1,440: of the
 * next). Reckoned from noon and asked for working hours only; clocks change at night.
 */
export function instantOf(day: string, minutes: number, zone: string): number {
  const key = `${zone}/${day}`
  let noon = noons.get(key)
  if (noon === undefined) {
    noon = instantOfClock({ day, minutes: 12 * 60 }, zone).getTime()
    noons.set(key, noon)
  }
  return noon + (minutes - 12 * 60) * 60_000
}

/** Days on which no studio of the demo fires: the turn of the year and twelve days of August. */
export function isHoliday(day: string): boolean {
  const monthDay = day.slice(5)
  return monthDay >= '12-22' || monthDay <= '01-03' || (monthDay >= '08-05' && monthDay <= '08-16')
}
