import type { Runner } from '../server/scheduling/types.js'
import type { JobId } from '../server/shared/jobs.js'
import { rollUp } from './roll-up.js'
import { study } from './study.js'
import { tidy } from './tidy.js'

/** What each job of the table (server/shared/jobs.ts) does. */
export const RUNNERS: Readonly<Record<JobId, Runner>> = { study, 'roll-up': rollUp, tidy }
