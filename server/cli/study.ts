/**
 * Studies a lot sheet, without a database:
 *   study --csv FILE [--studio NAME] [--seed N] [--json]
 * Findings go to stdout, what is wrong with the sheet to stderr. Exit 0 when the sheet could be studied, 1 when a
 * line of it is wrong, 2 when it cannot be read or an argument cannot be used.
 */
import { readFileSync } from 'node:fs'
import { parseArgs } from 'node:util'
import { parseLotSheet, type LotSheet } from '../imports/lotSheet.js'
import { studyOfLotSheet } from '../imports/lotSheetStudy.js'
import { plural } from '../shared/plural.js'
import { findingText } from '../shared/sentences/finding.js'
import { STUDY_FAULTS, studyLots, StudyTableBuilder } from '../study/index.js'
import type { Finding, StudyResult } from '../study/index.js'
import './endOfPipe.js'

const USAGE = 'Usage: npm run study -- --csv FILE [--studio NAME] [--seed N] [--json]'

interface Asked {
  file: string
  studio: string | undefined
  seed: number
  json: boolean
}

/** @throws Error with one line on what is wrong */
function read(args: string[]): Asked {
  const { values } = parseArgs({
    args,
    options: {
      csv: { type: 'string' },
      studio: { type: 'string' },
      seed: { type: 'string', default: '1' },
      json: { type: 'boolean', default: false },
    },
  })
  if (!values.csv) throw new Error('Name the lot sheet with --csv FILE.')
  const seed = Number(values.seed)
  if (!Number.isSafeInteger(seed))
    throw new Error(`--seed must be a whole number, not ${values.seed}.`)
  return { file: values.csv, studio: values.studio, seed, json: values.json }
}

function main(args: string[]): number {
  let asked: Asked
  let text: string
  try {
    asked = read(args)
    text = readFileSync(asked.file, 'utf8')
  } catch (error) {
    console.error((error as Error).message)
    console.error(USAGE)
    return 2
  }
  const sheet = parseLotSheet(text)
  if (sheet.problems.length > 0) return refuse(sheet, asked.json)
  const { factors, rows } = studyOfLotSheet(sheet)
  const studios = new Set(rows.map((row) => row.studio))
  if (asked.studio !== undefined && !studios.has(asked.studio)) {
    console.error(`The sheet has no studio "${asked.studio}"; it has ${[...studios].join(', ')}.`)
    return 2
  }
  const builder = new StudyTableBuilder(factors)
  for (const row of rows) builder.push(row)
  const result = studyLots(builder.build(), {
    faults: STUDY_FAULTS,
    seed: asked.seed,
    ...(asked.studio === undefined ? {} : { studio: asked.studio }),
  })
  if (asked.json) console.log(JSON.stringify(result, null, 2))
  else print(result)
  return 0
}

function refuse({ problems }: LotSheet, json: boolean): number {
  if (json) console.log(JSON.stringify({ problems }, null, 2))
  for (const { row, column, message } of problems)
    console.error(`line ${row}${column === '' ? '' : `, column ${column}`}: ${message}`)
  console.error(`${plural(problems.length, 'problem')}; nothing was studied.`)
  return 1
}

function print(result: StudyResult): void {
  const { firings, lots, pieces, comparisons, findings } = result
  const seen = [plural(firings, 'firing'), plural(lots, 'lot'), plural(pieces, 'piece')].join(', ')
  console.log(
    `${seen}; ${plural(comparisons, 'comparison')}, ${plural(findings.length, 'finding')}.`,
  )
  for (const finding of findings) {
    console.log(`\n${sentence(finding)}`)
    console.log(`  ${figures(finding)}`)
  }
  for (const { fault, pieces: lost } of result.notAtRisk)
    console.log(
      `\nTo be checked: ${plural(lost, 'piece')} with ${fault} in lots that could not show it.`,
    )
}

function sentence(finding: Finding): string {
  const [factor = '', second] = finding.factors
  const [level = '', other = ''] = finding.levels
  return findingText({
    fault: finding.fault,
    factor,
    level: { name: level },
    pair: second === undefined ? null : { factor: second, level: { name: other } },
    comparison: finding.comparison === 'within-firings' ? 'within-firing' : 'between-firings',
    ratio: finding.ratio,
    lower: finding.lower,
    upper: finding.upper,
    qValue: finding.qValue,
    exposed: { events: finding.exposedEvents, units: finding.exposedUnits },
    unexposed: { events: finding.unexposedEvents, units: finding.unexposedUnits },
    mixedStrata: finding.mixedStrata,
    informativeStrata: finding.informativeFirings,
    recordedShare: finding.coverage,
  })
}

function figures(finding: Finding): string {
  const range =
    finding.lower === null || finding.upper === null
      ? 'no interval'
      : `${finding.lower.toFixed(2)} to ${finding.upper.toFixed(2)}`
  return [
    `${finding.fault}, ${finding.factors.join(' × ')} = ${finding.levels.join(' × ')}`,
    `${finding.exposedEvents} of ${Math.round(finding.exposedUnits)} against ${finding.unexposedEvents} of ${Math.round(finding.unexposedUnits)}`,
    `ratio ${finding.ratio === null ? 'none' : finding.ratio.toFixed(2)} (${range})`,
    `q ${finding.qValue.toPrecision(2)}`,
  ].join('; ')
}

process.exitCode = main(process.argv.slice(2))
