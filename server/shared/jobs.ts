import type { When } from './schedule.js'

/** What a job is and when it runs; what it does stands in jobs/ under the same name. */
export interface JobFacts {
  job: JobId
  name: string
  description: string
  when: When
  /** Once for each network, in its zone; or once for the installation, in UTC, out of sight of its networks. */
  of: 'network' | 'installation'
}

export type JobId = 'study' | 'roll-up' | 'tidy'

/** The zone of jobs of the installation, and the network id of their slots. */
export const INSTALLATION = { networkId: 0, zone: 'UTC' } as const

const at = (hours: number, minutes: number): number => hours * 60 + minutes

/** The one table of jobs. */
export const JOBS: readonly JobFacts[] = [
  {
    job: 'study',
    name: 'Study',
    description:
      'Compares what the lots had in common with what they lost, for the network and each of its studios, and stores the findings.',
    when: { every: 'night', minutes: at(2, 15) },
    of: 'network',
  },
  {
    job: 'roll-up',
    name: 'Check of the totals',
    description:
      'Counts the totals behind the loss rates again from the lots and puts right what differs.',
    when: { every: 'week', weekday: 0, minutes: at(3, 0) },
    of: 'network',
  },
  {
    job: 'tidy',
    name: 'Tidying',
    description:
      'Removes sessions and one-time links that have expired, old sign-in attempts and old records of runs.',
    when: { every: 'night', minutes: at(3, 30) },
    of: 'installation',
  },
]

/** The job of that name, or undefined. */
export function jobFacts(job: string): JobFacts | undefined {
  return JOBS.find((each) => each.job === job)
}
