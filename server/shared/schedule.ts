import { addDays, instantOf, localTime, weekday } from './zonedTime.js'

/** When a job runs, by the wall clock of a zone: every night, or on one day of the week (0 is Sunday). */
export interface When {
  every: 'night' | 'week'
  /** Minutes from midnight. */
  minutes: number
  weekday?: number
}

/** One time at which a job is due. `slot` is the local day: each day's run happens once, whatever the clocks do. */
export interface Occurrence {
  slot: string
  at: Date
}

const WEEKDAYS = ['Sunday', 'Monday', 'Tuesday', 'Wednesday', 'Thursday', 'Friday', 'Saturday']

function runsOn(when: When, day: string): boolean {
  return when.every === 'night' || weekday(day) === when.weekday
}

function occurrence(when: When, day: string, zone: string): Occurrence {
  return { slot: day, at: instantOf({ day, minutes: when.minutes }, zone) }
}

/** The latest time at or before `now` at which it was due. */
export function lastOccurrence(when: When, zone: string, now: Date): Occurrence {
  for (let day = addDays(localTime(now, zone).day, 1); ; day = addDays(day, -1)) {
    if (!runsOn(when, day)) continue
    const found = occurrence(when, day, zone)
    if (found.at <= now) return found
  }
}

/** The next time after `now` at which it is due. */
export function nextOccurrence(when: When, zone: string, now: Date): Occurrence {
  for (let day = addDays(localTime(now, zone).day, -1); ; day = addDays(day, 1)) {
    if (!runsOn(when, day)) continue
    const found = occurrence(when, day, zone)
    if (found.at > now) return found
  }
}

/** "every night at 02:15, Europe/Lisbon time" */
export function scheduleInWords(when: When, zone: string): string {
  const clock = `${pad(Math.floor(when.minutes / 60))}:${pad(when.minutes % 60)}`
  const days = when.every === 'night' ? 'every night' : `every ${WEEKDAYS[when.weekday ?? 0]}`
  return `${days} at ${clock}, ${zone} time`
}

function pad(n: number): string {
  return String(n).padStart(2, '0')
}
