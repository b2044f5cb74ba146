/**
 * Wall-clock time of a zone, computed with Intl alone (the database holds no zone tables). Days are
 * `YYYY-MM-DD`; minutes count from local midnight; instants are Dates.
 */
export interface LocalTime {
  day: string
  minutes: number
}

const DAY_MS = 24 * 3600 * 1000

const formats = new Map<string, Intl.DateTimeFormat>()

function format(zone: string): Intl.DateTimeFormat {
  let found = formats.get(zone)
  if (!found) {
    found = new Intl.DateTimeFormat('en-GB', {
      timeZone: zone,
      calendar: 'iso8601',
      hourCycle: 'h23',
      year: 'numeric',
      month: '2-digit',
      day: '2-digit',
      hour: '2-digit',
      minute: '2-digit',
    })
    formats.set(zone, found)
  }
  return found
}

/**
 * What the clock on the wall of a zone shows at an instant.
 * @throws RangeError for a zone that Intl does not know
 */
export function localTime(at: Date, zone: string): LocalTime {
  const part: Partial<Record<Intl.DateTimeFormatPartTypes, string>> = {}
  for (const { type, value } of format(zone).formatToParts(at)) part[type] = value
  const day = `${(part.year ?? '').padStart(4, '0')}-${part.month}-${part.day}`
  return { day, minutes: Number(part.hour) * 60 + Number(part.minute) }
}

/** The day so many days later (earlier when negative); days of the calendar, whatever their length. */
export function addDays(day: string, days: number): string {
  return new Date(Date.parse(`${day}T00:00:00Z`) + days * DAY_MS).toISOString().slice(0, 10)
}

/** 0 is Sunday. */
export function weekday(day: string): number {
  return new Date(`${day}T00:00:00Z`).getUTCDay()
}

/** Milliseconds by which the zone's clock is ahead of UTC at an instant, to the minute. */
function aheadOfUtc(at: number, zone: string): number {
  const { day, minutes } = localTime(new Date(at), zone)
  return Date.parse(`${day}T00:00:00Z`) + minutes * 60_000 - Math.floor(at / 60_000) * 60_000
}

/**
 * The instant at which the zone's clock shows that time. Where summer time makes it show it twice,
 * the first; where it skips it, the moment by the clock of before the change (02:15 becomes 03:15).
 */
export function instantOf({ day, minutes }: LocalTime, zone: string): Date {
  const wanted = Date.parse(`${day}T00:00:00Z`) + minutes * 60_000
  const before = wanted - aheadOfUtc(wanted - DAY_MS, zone)
  const after = wanted - aheadOfUtc(wanted + DAY_MS, zone)
  for (const candidate of [Math.min(before, after), Math.max(before, after)]) {
    if (candidate + aheadOfUtc(candidate, zone) === wanted) return new Date(candidate)
  }
  return new Date(before)
}
