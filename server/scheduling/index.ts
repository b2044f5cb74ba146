import cron from 'node-cron'
import { RUNNERS } from '../../jobs/schedule.js'
import { whenRunRequested } from '../commands/requestRun.js'
import type { Deps } from '../deps.js'
import { runSlot } from './runSlot.js'
import { claimNext, insertDueSlots, ownerName } from './slots.js'
import type { Runner } from './types.js'

export interface Scheduler {
  /** Writes down what is due, then runs whatever waits, one after the other, until nothing does. */
  tick: () => Promise<void>
  /** Runs whatever waits. */
  drain: () => Promise<void>
  /** Takes no more runs and gives the present one back; resolves when nothing of it is left. */
  stop: () => Promise<void>
}

/** A scheduler without a clock of its own: the parts that `startScheduler` sets going. */
export function createScheduler(
  deps: Deps,
  runners: Readonly<Partial<Record<string, Runner>>> = RUNNERS,
): Scheduler {
  const owner = ownerName()
  const stopping = new AbortController()
  let draining: Promise<void> | null = null
  let again = false

  const runAll = async (): Promise<void> => {
    do {
      again = false
      for (;;) {
        const held = stopping.signal.aborted ? null : await claimNext(owner, deps)
        if (!held) break
        await runSlot(held, runners[held.job], deps, stopping.signal)
      }
    } while (again && !stopping.signal.aborted)
  }
  const drain = (): Promise<void> => {
    again = true
    draining ??= runAll().finally(() => {
      draining = null
    })
    return draining
  }
  return {
    drain,
    tick: async () => {
      if (stopping.signal.aborted) return
      await insertDueSlots(deps)
      await drain()
    },
    stop: async () => {
      stopping.abort(new Error('The server is stopping.'))
      await draining?.catch(() => undefined)
    },
  }
}

/**
 * Starts the scheduler of this process: a look at once and every minute, and whenever somebody here
 * asks for a run. Any number of servers may do so over one database.
 */
export function startScheduler(deps: Deps): { stop: () => Promise<void> } {
  const scheduler = createScheduler(deps)
  const guarded = (work: () => Promise<void>): void => {
    work().catch((error: unknown) =>
      deps.logger.error({ err: error }, 'the scheduler could not look for work'),
    )
  }
  // Not awaited: a long run must not keep the next minute from being written down.
  const task = cron.schedule('* * * * *', () => guarded(scheduler.tick))
  const forget = whenRunRequested(deps, () => guarded(scheduler.drain))
  guarded(scheduler.tick)
  return {
    stop: async () => {
      forget()
      await task.destroy()
      await scheduler.stop()
    },
  }
}
