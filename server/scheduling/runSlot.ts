import type { Deps } from '../deps.js'
import { LEASE_MS, failSlot, finishSlot, releaseSlot, renewSlot } from './slots.js'
import type { HeldSlot, Runner } from './types.js'

/** The run has been taken over by another process. */
class TakenOverError extends Error {
  constructor() {
    super('Another server has taken this run over.')
    this.name = 'TakenOverError'
  }
}

export type RunEnd =
  | { status: 'done'; outcome: string }
  | { status: 'failed' | 'released' | 'taken-over'; error: unknown }

/**
 * Runs a job whose slot this process holds, renews the hold meanwhile and stores how it ended.
 * Never throws for what the job does; `stop` gives the run back.
 */
export async function runSlot(
  held: HeldSlot,
  runner: Runner | undefined,
  deps: Deps,
  stop: AbortSignal,
  onProgress?: (percent: number) => void,
): Promise<RunEnd> {
  const lost = new AbortController()
  const signal = AbortSignal.any([stop, lost.signal])
  const hold = async (percent?: number): Promise<void> => {
    if (!(await renewSlot(held, deps, percent))) lost.abort(new TakenOverError())
  }
  // A renewal that fails once is made good by the next: the lease spans three.
  const timer = setInterval(() => {
    hold().catch((error: unknown) =>
      deps.logger.warn({ err: error, job: held.job }, 'a lease was not renewed'),
    )
  }, LEASE_MS / 3)
  timer.unref()
  try {
    if (!runner) throw new Error(`This server knows no job "${held.job}".`)
    const outcome = await runner({
      networkId: held.networkId,
      deps,
      signal,
      progress: async (percent) => {
        onProgress?.(percent)
        await hold(percent)
        signal.throwIfAborted()
      },
    })
    return (await finishSlot(held, outcome, deps))
      ? { status: 'done', outcome }
      : { status: 'taken-over', error: new TakenOverError() }
  } catch (error) {
    return await endBadly(held, error, deps, stop, lost.signal)
  } finally {
    clearInterval(timer)
  }
}

async function endBadly(
  held: HeldSlot,
  error: unknown,
  deps: Deps,
  stop: AbortSignal,
  lost: AbortSignal,
): Promise<RunEnd> {
  if (lost.aborted) return { status: 'taken-over', error }
  if (stop.aborted) {
    await releaseSlot(held)
    return { status: 'released', error }
  }
  deps.logger.error(
    {
      err: error,
      job: held.job,
      slot: held.slot,
      networkId: held.networkId,
      attempt: held.attempt,
    },
    'a job failed',
  )
  await failSlot(held, error, deps)
  return { status: 'failed', error }
}
