import type { Deps } from '../deps.js'

/** What a run is given. */
export interface JobContext {
  /** 0 for jobs of the installation. */
  networkId: number
  deps: Deps
  /** Aborted when the server stops or the run has been taken over: end soon, by throwing. */
  signal: AbortSignal
  /** Per cent done. Throws when the run has been taken over by another process. */
  progress: (percent: number) => Promise<void>
}

/** What a job does; answers its outcome in a sentence. Throwing makes it try again later. */
export type Runner = (context: JobContext) => Promise<string>

/** A run of a job that this process holds. */
export interface HeldSlot {
  id: number
  job: string
  slot: string
  networkId: number
  /** Names the holder; every later change of the row repeats it. */
  owner: string
  /** 1 for the first try. */
  attempt: number
}
