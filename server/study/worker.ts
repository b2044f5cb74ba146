/**
 * The study's thread: streams a network's lots over a connection of its own, compares them for the
 * network and for every studio with enough firings, and posts the numbers back. Storing is left to
 * the main side.
 */
import { parentPort, workerData } from 'node:worker_threads'
import { connectForStudy, openLots } from '../queries/streamLots.js'
import { FACTORS } from '../shared/factors.js'
import { STUDY_FAULTS, studyLots, StudyTableBuilder } from './index.js'
import type { StudyTable } from './index.js'
import type { StudyMessage, StudyOrder, ScopeResult } from './inWorker.js'

/** Per cent of the work at which the lots are read. */
const READ = 40
const REPORT_EVERY = 2000

const post = (message: StudyMessage): void => parentPort?.postMessage(message)

async function readTable(order: StudyOrder): Promise<{ table: StudyTable; watermark: number }> {
  const connection = await connectForStudy(order.databaseUrl)
  try {
    const snapshot = await openLots(connection, order)
    const builder = new StudyTableBuilder(FACTORS)
    let read = 0
    for await (const lot of snapshot.rows()) {
      builder.push(lot)
      read += 1
      if (read % REPORT_EVERY === 0)
        post({ type: 'progress', percent: (READ * read) / snapshot.lots })
    }
    return { table: builder.build(), watermark: snapshot.watermark }
  } finally {
    await connection.end()
  }
}

/** Studios with enough firings, most firings first. */
function studiosToStudy({ firings }: StudyTable, least: number): string[] {
  const counts = new Map<string, number>()
  for (const code of firings.studio) {
    const studio = firings.studios[code]
    if (studio !== undefined) counts.set(studio, (counts.get(studio) ?? 0) + 1)
  }
  return [...counts]
    .filter(([, count]) => count >= least)
    .sort(([, a], [, b]) => b - a)
    .map(([studio]) => studio)
}

const order = workerData as StudyOrder
const { table, watermark } = await readTable(order)
post({ type: 'progress', percent: READ })
const options = { faults: STUDY_FAULTS, seed: order.seed, level: order.level, keep: order.keep }
const studios: (string | null)[] = [null, ...studiosToStudy(table, order.leastFirings)]
const scopes: ScopeResult[] = []
for (const studio of studios) {
  scopes.push({
    studioId: studio === null ? null : Number(studio),
    result: studyLots(table, { ...options, ...(studio !== null && { studio }) }),
  })
  post({ type: 'progress', percent: READ + ((100 - READ) * scopes.length) / studios.length })
}
post({ type: 'done', watermark, scopes })
