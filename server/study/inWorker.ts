import { resolve } from 'node:path'
import { fileURLToPath } from 'node:url'
import { Worker } from 'node:worker_threads'
import type { StudyResult } from './types.js'

/** What the thread is asked. */
export interface StudyOrder {
  databaseUrl: string
  networkId: number
  /** First and last local day, both included. */
  from: string
  to: string
  /** A studio with fewer reported firings in the window is not studied by itself. */
  leastFirings: number
  seed: number
  /** Confidence of intervals. */
  level: number
  /** Findings are kept up to this q. */
  keep: number
}

/** Numbers of one scope; null is the whole network. */
export interface ScopeResult {
  studioId: number | null
  result: StudyResult
}

export interface StudyAnswer {
  /** Newest report revision that was seen. */
  watermark: number
  /** The network first. */
  scopes: ScopeResult[]
}

export type StudyMessage = { type: 'progress'; percent: number } | ({ type: 'done' } & StudyAnswer)

export interface StudyThreadOptions {
  onProgress?: (percent: number) => void
  /** Ends the thread; the promise rejects with its reason. */
  signal?: AbortSignal
}

/**
 * Computes a study in a thread of its own, so that whoever serves requests meanwhile is not held up.
 * @throws what the thread threw (no database, impossible rows), or the signal's reason
 */
export async function studyInWorker(
  order: StudyOrder,
  { onProgress, signal }: StudyThreadOptions = {},
): Promise<StudyAnswer> {
  signal?.throwIfAborted()
  const worker = await startThread(order)
  const end = (): void => void worker.terminate()
  signal?.addEventListener('abort', end, { once: true })
  try {
    return await answerOf(worker, onProgress, signal)
  } finally {
    signal?.removeEventListener('abort', end)
    await worker.terminate()
  }
}

function answerOf(
  worker: Worker,
  onProgress: StudyThreadOptions['onProgress'],
  signal: AbortSignal | undefined,
): Promise<StudyAnswer> {
  return new Promise((resolveAnswer, reject) => {
    worker.on('message', (message: StudyMessage) => {
      if (message.type === 'progress') onProgress?.(message.percent)
      else resolveAnswer({ watermark: message.watermark, scopes: message.scopes })
    })
    worker.once('error', reject)
    worker.once('exit', (code) => {
      const reason: unknown = signal?.reason
      reject(
        reason instanceof Error
          ? reason
          : new Error(`The study's thread ended early (code ${code}).`),
      )
    })
  })
}

/** Built servers start the built file; from source (dev, tests, tools) it is bundled when first needed. */
async function startThread(order: StudyOrder): Promise<Worker> {
  if (!import.meta.url.endsWith('.ts'))
    return new Worker(resolve('dist/server/study/worker.js'), { workerData: order })
  return new Worker(await bundled(), {
    eval: true,
    workerData: order,
    execArgv: ['--input-type=module'],
  })
}

let bundle: Promise<string> | undefined

/** Kept in memory: a file would have to be cleaned up, and must lie where packages are found. */
function bundled(): Promise<string> {
  bundle ??= import('esbuild').then(async ({ build }) => {
    const built = await build({
      entryPoints: [fileURLToPath(new URL('worker.ts', import.meta.url))],
      bundle: true,
      write: false,
      platform: 'node',
      format: 'esm',
      target: 'node20',
      packages: 'external',
      sourcemap: 'inline',
      logLevel: 'silent',
    })
    return built.outputFiles[0]?.text ?? ''
  })
  return bundle
}
