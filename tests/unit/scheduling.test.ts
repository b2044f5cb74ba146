import { describe, expect, it } from 'vitest'
import { dueSlots, slotKey } from '../../server/scheduling/dueSlots.js'
import type { NetworkZone } from '../../server/scheduling/dueSlots.js'
import type { JobFacts } from '../../server/shared/jobs.js'
import { JOBS } from '../../server/shared/jobs.js'
import { lastOccurrence, nextOccurrence, scheduleInWords } from '../../server/shared/schedule.js'
import { instantOf, localTime } from '../../server/shared/zonedTime.js'

// Dates of the changes: IANA time zone database, as Node's ICU ships it.
const nightly: JobFacts = {
  job: 'study',
  name: '',
  description: '',
  of: 'network',
  when: { every: 'night', minutes: 135 },
}
const weekly: JobFacts = {
  ...nightly,
  job: 'roll-up',
  when: { every: 'week', weekday: 0, minutes: 180 },
}
const long = new Date('2020-01-01T00:00:00Z')
const lisbon: NetworkZone = { networkId: 1, timeZone: 'Europe/Lisbon', since: long }
const berlin: NetworkZone = { networkId: 2, timeZone: 'Europe/Berlin', since: long }
const newYork: NetworkZone = { networkId: 3, timeZone: 'America/New_York', since: long }

function due(
  at: string,
  zones: NetworkZone[],
  last: Record<string, string> = {},
  jobs = [nightly],
): string[] {
  return dueSlots(new Date(at), jobs, zones, new Map(Object.entries(last))).map(
    ({ job, networkId, slot }) => `${job}/${networkId} ${slot}`,
  )
}

/** The slots that a scheduler which looks every quarter of an hour writes down, with the minute of each. */
function everyQuarter(
  from: string,
  minutes: number,
  zone: NetworkZone,
  jobs = [nightly],
): string[] {
  const last = new Map<string, string>()
  const seen: string[] = []
  for (let minute = 0; minute < minutes; minute += 15) {
    const now = new Date(Date.parse(from) + minute * 60_000)
    for (const { job, networkId, slot } of dueSlots(now, jobs, [zone], last)) {
      last.set(slotKey(job, networkId), slot)
      seen.push(`${slot} at ${now.toISOString().slice(0, 16)}Z`)
    }
  }
  return seen
}

describe('dueSlots', () => {
  it('is due at 02:15 by the clock of each network', () => {
    const last = { 'study/1': '2026-01-14', 'study/2': '2026-01-14', 'study/3': '2026-01-14' }
    const zones = [lisbon, berlin, newYork]
    expect(due('2026-01-15T01:14:59Z', zones, last)).toEqual([])
    expect(due('2026-01-15T01:15:00Z', zones, last)).toEqual(['study/2 2026-01-15'])
    expect(due('2026-01-15T02:15:00Z', zones, last)).toEqual([
      'study/1 2026-01-15',
      'study/2 2026-01-15',
    ])
    expect(due('2026-01-15T07:15:00Z', zones, last)).toHaveLength(3)
  })

  it('makes up only the latest of several missed nights', () => {
    expect(due('2026-01-20T12:00:00Z', [lisbon], { 'study/1': '2026-01-14' })).toEqual([
      'study/1 2026-01-20',
    ])
  })

  it('is not due a second time when the clock is set back', () => {
    const last = { 'study/1': '2026-01-20' }
    expect(due('2026-01-20T02:15:00Z', [lisbon], last)).toEqual([])
    expect(due('2026-01-19T12:00:00Z', [lisbon], last)).toEqual([])
    expect(due('2026-01-20T01:00:00Z', [lisbon], last)).toEqual([])
  })

  it('owes a new network nothing of the night before it was made', () => {
    const fresh = { ...lisbon, since: new Date('2026-01-20T11:00:00Z') }
    expect(due('2026-01-20T12:00:00Z', [fresh])).toEqual([])
    expect(due('2026-01-21T02:15:00Z', [fresh])).toEqual(['study/1 2026-01-21'])
  })

  it('runs a weekly job on its day alone', () => {
    expect(
      everyQuarter(
        '2026-01-12T00:00:00Z',
        15 * 24 * 60,
        { ...lisbon, since: new Date('2026-01-12T00:00:00Z') },
        [weekly],
      ),
    ).toEqual(['2026-01-18 at 2026-01-18T03:00Z', '2026-01-25 at 2026-01-25T03:00Z'])
  })

  it('makes one slot of the installation, whatever the networks', () => {
    const tidy = JOBS.filter(({ of }) => of === 'installation')
    expect(due('2026-01-15T03:30:00Z', [], { 'tidy/0': '2026-01-14' }, tidy)).toEqual([
      'tidy/0 2026-01-15',
    ])
    expect(due('2026-01-15T03:30:00Z', [lisbon, berlin], { 'tidy/0': '2026-01-14' }, tidy)).toEqual(
      ['tidy/0 2026-01-15'],
    )
  })
})

describe('summer time', () => {
  const fresh = (zone: NetworkZone, since: string): NetworkZone => ({
    ...zone,
    since: new Date(since),
  })

  it('runs once in the night whose 02:15 does not exist, right after the hour that is skipped', () => {
    // Berlin 2026-03-29 02:00 becomes 03:00; New York 2026-03-08 02:00 becomes 03:00.
    expect(
      everyQuarter('2026-03-28T22:00:00Z', 26 * 60, fresh(berlin, '2026-03-28T22:00:00Z')),
    ).toEqual(['2026-03-29 at 2026-03-29T01:15Z'])
    expect(
      everyQuarter('2026-03-08T00:00:00Z', 26 * 60, fresh(newYork, '2026-03-08T00:00:00Z')),
    ).toEqual(['2026-03-08 at 2026-03-08T07:15Z'])
  })

  it('runs once in the night that has 02:15 twice, at the first', () => {
    // Berlin 2026-10-25 03:00 becomes 02:00.
    expect(
      everyQuarter('2026-10-24T22:00:00Z', 25 * 60, fresh(berlin, '2026-10-24T22:00:00Z')),
    ).toEqual(['2026-10-25 at 2026-10-25T00:15Z'])
  })

  it('runs once in the nights of a zone whose change leaves 02:15 alone', () => {
    // Lisbon changes at 01:00 and 02:00, New York in autumn at 02:00 to 01:00.
    expect(
      everyQuarter('2026-03-28T12:00:00Z', 24 * 60, fresh(lisbon, '2026-03-28T12:00:00Z')),
    ).toEqual(['2026-03-29 at 2026-03-29T01:15Z'])
    expect(
      everyQuarter('2026-10-24T12:00:00Z', 24 * 60, fresh(lisbon, '2026-10-24T12:00:00Z')),
    ).toEqual(['2026-10-25 at 2026-10-25T02:15Z'])
    expect(
      everyQuarter('2026-11-01T03:00:00Z', 24 * 60, fresh(newYork, '2026-11-01T03:00:00Z')),
    ).toEqual(['2026-11-01 at 2026-11-01T07:15Z'])
  })
})

describe('instantOf', () => {
  it('gives back the time that localTime reads off, at every quarter hour of a year that exists', () => {
    for (const zone of [
      'Europe/Lisbon',
      'Europe/Berlin',
      'America/New_York',
      'Australia/Lord_Howe',
      'Asia/Kathmandu',
    ]) {
      for (
        let at = Date.parse('2026-01-01T00:00:00Z');
        at < Date.parse('2027-01-01T00:00:00Z');
        at += 101 * 15 * 60_000
      ) {
        const local = localTime(new Date(at), zone)
        const back = instantOf(local, zone).getTime()
        // An hour that is there twice is read as its first.
        expect([at, at - 3_600_000, at - 1_800_000]).toContain(back)
        expect(localTime(new Date(back), zone)).toEqual(local)
      }
    }
  })
})

describe('schedule in words and in time', () => {
  it('says when a job runs in the zone of the network', () => {
    expect(scheduleInWords(nightly.when, 'Europe/Lisbon')).toBe(
      'every night at 02:15, Europe/Lisbon time',
    )
    expect(scheduleInWords(weekly.when, 'America/New_York')).toBe(
      'every Sunday at 03:00, America/New_York time',
    )
  })

  it('puts the next time after the last one', () => {
    const now = new Date('2026-06-10T01:15:00Z')
    expect(lastOccurrence(nightly.when, 'Europe/Lisbon', now)).toEqual({
      slot: '2026-06-10',
      at: now,
    })
    expect(nextOccurrence(nightly.when, 'Europe/Lisbon', now).at.toISOString()).toBe(
      '2026-06-11T01:15:00.000Z',
    )
    expect(nextOccurrence(weekly.when, 'Europe/Lisbon', now).at.toISOString()).toBe(
      '2026-06-14T02:00:00.000Z',
    )
  })
})
