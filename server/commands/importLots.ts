import { createHash } from 'node:crypto'
import type { Transaction } from 'sequelize'
import { inTransaction } from '../database/inTransaction.js'
import type { Deps } from '../deps.js'
import { parseLotSheet } from '../imports/lotSheet.js'
import type { SheetProblem } from '../imports/lotSheet.js'
import { planImport } from '../imports/planImport.js'
import type { ImportPlan } from '../imports/planImport.js'
import { AuditEvent } from '../models/index.js'
import type { Scope } from '../policies/index.js'
import { refreshStatistics } from '../queries/refreshStatistics.js'
import { systemScope } from '../queries/scopeFor.js'
import type { FiringKind } from '../shared/kinds.js'
import { localTime } from '../shared/zonedTime.js'
import { createNetwork } from './createNetwork.js'
import { knownNames, makeNames } from './importNames.js'
import type { NewNames } from './importNames.js'
import { importedFiring } from './importedFiring.js'
import { rebuildRollups } from './rebuildRollups.js'
import { recordAudit } from './recordAudit.js'
import { writeFirings } from './writeFirings.js'
import type { Written } from './writeFirings.js'

export interface ImportRequest {
  /** Name of the file, for the record. */
  file: string
  text: string
  /** Slug of the network. */
  network: string
  /** Makes the network when it is missing, with its slug as name. */
  create?: { timeZone: string }
  /** For what the sheet has no column: Studio 1, Kiln 1, bisque, today. */
  defaults?: { studio?: string; kiln?: string; kind?: FiringKind; date?: string }
  /** Headers that are to be read as if they were called otherwise. */
  as?: Readonly<Record<string, string>>
  /** Takes a sheet that was imported before. */
  again?: boolean
  /** Does everything and takes it back. */
  dryRun?: boolean
}

export interface ImportSummary extends Written {
  network: string
  created: boolean
  /** New names, as they were written. */
  names: NewNames
  notices: string[]
  dryRun: boolean
}

/** Nothing was imported, and why. */
export class ImportRefused extends Error {
  constructor(
    message: string,
    readonly problems: readonly SheetProblem[] = [],
  ) {
    super(message)
    this.name = 'ImportRefused'
  }
}

/** Ends the transaction of a dry run. */
class TakeBack extends Error {
  constructor(readonly summary: ImportSummary) {
    super('Dry run')
  }
}

const ACTION = 'lots.imported'
/** Firings in one piece of work, so that a long sheet needs little memory at once. */
const AT_ONCE = 500

/**
 * Imports a lot sheet as the system: firings as reported, with what is missing of studios, kilns and
 * levels, all or nothing. Roll-ups and key statistics follow.
 * @throws ImportRefused with every problem of the sheet; for a network that is not there; for a sheet
 *   whose content was imported before
 */
export async function importLots(request: ImportRequest, deps: Deps): Promise<ImportSummary> {
  try {
    const summary = await inTransaction(deps.sequelize, async (transaction) => {
      const made = await importIn(request, deps, transaction)
      if (request.dryRun) throw new TakeBack(made)
      return made
    })
    await refreshStatistics(deps.sequelize)
    return summary
  } catch (error) {
    if (error instanceof TakeBack) return error.summary
    throw error
  }
}

async function importIn(
  request: ImportRequest,
  deps: Deps,
  transaction: Transaction,
): Promise<ImportSummary> {
  const { scope, created } = await networkOf(request, deps, transaction)
  const hash = createHash('sha256').update(request.text).digest('hex')
  if (!request.again) await refuseTwice(scope, hash, transaction)
  const plan = planImport(
    parseLotSheet(request.text, { as: request.as }),
    await knownNames(scope, transaction),
    defaultsOf(request, scope, deps),
  )
  refuseProblems(plan)
  const { names, keys, uids } = await makeNames(scope, plan, deps, transaction)
  const written: Written = { firings: 0, lots: 0, pieces: 0, losses: 0 }
  const at = deps.clock.now()
  for (let from = 0; from < plan.firings.length; from += AT_ONCE) {
    const firings = plan.firings
      .slice(from, from + AT_ONCE)
      .map((firing) => importedFiring(firing, uids, at))
    const part = await writeFirings(scope, firings, keys, { ...deps, transaction })
    for (const count of ['firings', 'lots', 'pieces', 'losses'] as const)
      written[count] += part[count]
  }
  await rebuildRollups(scope, deps, transaction)
  const after = { file: request.file, hash, ...written }
  await recordAudit(scope, deps, { action: ACTION, subject: 'import', after }, transaction)
  const { network: slug } = request
  return {
    network: slug,
    created,
    ...written,
    names,
    notices: plan.notices,
    dryRun: request.dryRun === true,
  }
}

async function networkOf(
  { network: slug, create }: ImportRequest,
  deps: Deps,
  transaction: Transaction,
): Promise<{ scope: Scope; created: boolean }> {
  const there = await systemScope(slug, transaction)
  if (there) return { scope: there, created: false }
  if (!create) throw new ImportRefused(`There is no network ${slug} (--create makes it).`)
  await createNetwork({ slug, name: slug, timeZone: create.timeZone }, deps, transaction)
  const made = await systemScope(slug, transaction)
  if (!made) throw new Error(`The network ${slug} was made and is not there.`)
  return { scope: made, created: true }
}

async function refuseTwice(
  { networkId }: Scope,
  hash: string,
  transaction: Transaction,
): Promise<void> {
  const events = await AuditEvent.findAll({ where: { networkId, action: ACTION }, transaction })
  const before = events.find(
    ({ afterState }) => (afterState as { hash?: string } | null)?.hash === hash,
  )
  if (!before) return
  const day = before.at.toISOString().slice(0, 10)
  throw new ImportRefused(`This sheet was imported on ${day} (--again takes it a second time).`)
}

function defaultsOf({ defaults = {} }: ImportRequest, scope: Scope, { clock }: Deps) {
  const today = localTime(clock.now(), scope.network.timeZone).day
  const { studio = 'Studio 1', kiln = 'Kiln 1', kind = 'bisque', date = today } = defaults
  return { studio, kiln, kind, date, today }
}

function refuseProblems({ problems, firings }: ImportPlan): void {
  if (problems.length > 0)
    throw new ImportRefused('The sheet cannot be imported as it is.', problems)
  if (firings.length === 0) throw new ImportRefused('The sheet has no lots.')
}
