import type { z } from 'zod'
import type { firingFilters } from '../contract/firings.js'
import { Kiln, Level, Lot, Studio } from '../models/index.js'
import { factor as factorOf, openingTemperatureBand } from '../shared/factors.js'
import { withDescendants } from '../shared/faults/index.js'

export type FiringFilters = z.output<typeof firingFilters>

/** A condition on `firings f`, with its named values. */
export interface FiringWhere {
  sql: string
  replacements: Record<string, unknown>
}

const list = (text: string | undefined): string[] => (text ?? '').split(',').filter(Boolean)
const NOTHING = '1 = 0'

/**
 * The condition that filters of the list of firings come to, inside the studios given. What is not
 * there, or is of another network, matches nothing. Without `status` void firings are left out.
 * Several levels of one factor are alternatives; levels of several factors must all be there.
 *
 * @param studios ids of the studios that the person may read; null where that is every studio
 */
export async function firingWhere(
  networkId: number,
  studios: readonly number[] | null,
  filters: FiringFilters,
): Promise<FiringWhere> {
  const [studioIds, kilnIds, levels] = await Promise.all([
    chosen(networkId, Studio, filters.studio, studios),
    chosen(networkId, Kiln, filters.kiln, null),
    levelsOf(networkId, filters.level),
  ])
  const { status, from, to, lost } = filters
  const kinds = list(filters.kind)
  const faults = list(filters.fault).flatMap(withDescendants)
  const parts = [
    'f.network_id = :networkId',
    status ? 'f.status = :status' : "f.status <> 'void'",
    inList('f.studio_id', 'studioIds', studioIds),
    inList('f.kiln_id', 'kilnIds', kilnIds),
    kinds.length > 0 ? 'f.kind IN (:kinds)' : '',
    from ? 'f.local_date >= :from' : '',
    to ? 'f.local_date <= :to' : '',
    lost === 'some' ? 'f.wasters + f.refires > 0' : '',
    lost === 'none' ? 'f.wasters + f.refires = 0' : '',
    filters.fault ? mentions(faults) : '',
    ...levels,
  ]
  return {
    sql: parts.filter(Boolean).join(' AND '),
    replacements: {
      networkId,
      status,
      studioIds,
      kilnIds,
      kinds,
      from,
      to,
      faults,
      faultsJson: JSON.stringify(faults),
    },
  }
}

function inList(column: string, name: string, ids: readonly number[] | null): string {
  if (ids === null) return ''
  return ids.length > 0 ? `${column} IN (:${name})` : NOTHING
}

/** Ids of what the filter names, within those allowed; null for no condition at all. */
async function chosen(
  networkId: number,
  model: typeof Studio | typeof Kiln,
  filter: string | undefined,
  allowed: readonly number[] | null,
): Promise<readonly number[] | null> {
  const uids = list(filter)
  if (uids.length === 0) return allowed
  const where = { networkId, uid: uids }
  const rows =
    model === Studio
      ? await Studio.findAll({ where, attributes: ['id'], raw: true })
      : await Kiln.findAll({ where, attributes: ['id'], raw: true })
  return rows.map(({ id }) => id).filter((id) => allowed === null || allowed.includes(id))
}

/** Losses that name one of the faults, as the main one or as another. */
function mentions(faults: readonly string[]): string {
  if (faults.length === 0) return NOTHING
  return `EXISTS (SELECT 1 FROM losses x WHERE x.network_id = f.network_id AND x.firing_id = f.id
    AND (x.fault IN (:faults) OR JSON_OVERLAPS(x.also_faults, :faultsJson)))`
}

async function levelsOf(networkId: number, filter: string | undefined): Promise<string[]> {
  const uids = list(filter)
  if (uids.length === 0) return []
  const rows = await Level.findAll({
    where: { networkId, uid: uids },
    attributes: ['id', 'factor', 'code'],
    raw: true,
  })
  if (rows.length < new Set(uids).size) return [NOTHING]
  const factors = [...new Set(rows.map(({ factor }) => factor))]
  return factors.map((factor) =>
    holdsLevel(
      factor,
      rows.filter((row) => row.factor === factor),
    ),
  )
}

/** Ids are numbers of our own and columns come from the registry: they may stand in the text. */
function holdsLevel(
  factor: string,
  levels: readonly { id: number; code?: string | null }[],
): string {
  const ids = levels.map(({ id }) => Number(id)).join(',')
  if (factor === 'programme') return `f.programme_id IN (${ids})`
  if (factor === 'opening_temperature')
    return `(${levels.map(({ code }) => openedWithin(code ?? '')).join(' OR ')})`
  const { of, column, several } = factorOf(factor) ?? { of: 'lot' }
  if (of === 'firing') {
    return `EXISTS (SELECT 1 FROM firing_levels x WHERE x.network_id = f.network_id AND x.firing_id = f.id AND x.level_id IN (${ids}))`
  }
  const further = `EXISTS (SELECT 1 FROM lots l JOIN lot_levels x ON x.network_id = l.network_id AND x.lot_id = l.id
    WHERE l.network_id = f.network_id AND l.firing_id = f.id AND x.level_id IN (${ids}))`
  if (column === undefined) return further
  const field = Lot.getAttributes()[column as 'glazeId'].field
  const own = `EXISTS (SELECT 1 FROM lots l WHERE l.network_id = f.network_id AND l.firing_id = f.id AND l.${field} IN (${ids}))`
  return several ? `(${own} OR ${further})` : own
}

/** Whole degrees that a reading can have, by band: the registry's own function says which. */
const BANDS = new Map<string, { from: number; to: number }>()
for (let celsius = -20; celsius <= 1400; celsius += 1) {
  const code = openingTemperatureBand(celsius) as string
  BANDS.set(code, { from: BANDS.get(code)?.from ?? celsius, to: celsius })
}

function openedWithin(code: string): string {
  const band = BANDS.get(code)
  return band ? `f.opening_temperature_c BETWEEN ${band.from} AND ${band.to}` : NOTHING
}
