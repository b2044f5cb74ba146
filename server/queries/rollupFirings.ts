import { Op, QueryTypes } from 'sequelize'
import type { Transaction, WhereOptions } from 'sequelize'
import { Firing, FiringLevel, Level, Loss, Lot, LotLevel } from '../models/index.js'
import { LOT_FACTORS, openingTemperatureBand } from '../shared/factors.js'
import { hasGlaze, hasJoint } from '../shared/faults/index.js'
import type { LevelOfFactor, RollupFiring, RollupLoss, RollupLot } from '../shared/lossRollup.js'

/** What a network's fixed levels mean: codes by id, and the band of each opening temperature. */
export interface FixedLevels {
  codes: ReadonlyMap<number, string>
  openingBands: ReadonlyMap<string, number>
}

/** The fixed levels that the roll-ups ask about. */
export async function fixedLevels(
  networkId: number,
  transaction?: Transaction,
): Promise<FixedLevels> {
  const rows = await Level.findAll({
    where: { networkId, factor: ['forming', 'glaze_sides', 'opening_temperature'] },
    attributes: ['id', 'factor', 'code'],
    raw: true,
    transaction,
  })
  const coded = rows.flatMap(({ id, factor, code }) =>
    code === null ? [] : [{ id, factor, code }],
  )
  return {
    codes: new Map(coded.map(({ id, code }) => [id, code])),
    openingBands: new Map(
      coded
        .filter(({ factor }) => factor === 'opening_temperature')
        .map(({ id, code }) => [code, id]),
    ),
  }
}

/** A reported firing as the roll-ups see it, with its id for paging. */
export type FiringToRollUp = RollupFiring & { id: number }

type Which = { firingId: number } | { kilnId: number; afterId: number; limit: number }

/** Reported firings: one, or a page of a kiln's by id. Empty for a firing that is packed or void. */
export async function rollupFirings(
  networkId: number,
  which: Which,
  fixed: FixedLevels,
  transaction?: Transaction,
): Promise<FiringToRollUp[]> {
  const one = 'firingId' in which
  const where: WhereOptions<Firing> = one
    ? { networkId, status: 'reported', id: which.firingId }
    : { networkId, status: 'reported', kilnId: which.kilnId, id: { [Op.gt]: which.afterId } }
  const firings = await Firing.findAll({
    where,
    attributes: [
      'id',
      'studioId',
      'kilnId',
      'kind',
      'localDate',
      'programmeId',
      'openingTemperatureC',
    ],
    order: [['id', 'ASC']],
    limit: one ? 1 : which.limit,
    raw: true,
    transaction,
  })
  const parts = await partsOf(
    networkId,
    firings.map(({ id }) => id),
    fixed,
    transaction,
  )
  return firings.map((firing) => ({
    id: firing.id,
    studioId: firing.studioId,
    kilnId: firing.kilnId,
    kind: firing.kind,
    month: `${firing.localDate.slice(0, 7)}-01`,
    levels: [...(parts.levels.get(firing.id) ?? []), ...ownLevels(firing, fixed)],
    lots: parts.lots.get(firing.id) ?? [],
  }))
}

/** Levels that have a column of the firing, and the band of its opening temperature. */
function ownLevels(
  {
    programmeId,
    openingTemperatureC,
  }: { programmeId?: number | null; openingTemperatureC?: number | null },
  { openingBands }: FixedLevels,
): LevelOfFactor[] {
  const band = openingBands.get(openingTemperatureBand(openingTemperatureC ?? null) ?? '')
  return [
    ...(programmeId ? [{ factor: 'programme', levelId: programmeId }] : []),
    ...(band === undefined ? [] : [{ factor: 'opening_temperature', levelId: band }]),
  ]
}

function grouped<R, V>(
  rows: readonly R[],
  keyOf: (row: R) => number,
  valueOf: (row: R) => V,
): Map<number, V[]> {
  const map = new Map<number, V[]>()
  for (const row of rows) {
    const list = map.get(keyOf(row))
    if (list) list.push(valueOf(row))
    else map.set(keyOf(row), [valueOf(row)])
  }
  return map
}

const LOT_ATTRIBUTES = [
  'id',
  'firingId',
  'pieces',
  'turnedAway',
  'seconds',
  'refires',
  'wasters',
  'undecided',
  'notLookedAt',
  'refireCount',
  ...LOT_FACTORS.flatMap(({ column }) => column ?? []),
]

async function partsOf(
  networkId: number,
  firingIds: number[],
  fixed: FixedLevels,
  transaction?: Transaction,
) {
  const of = { where: { networkId, firingId: firingIds }, raw: true, transaction } as const
  const lots = await Lot.findAll({ ...of, attributes: LOT_ATTRIBUTES, order: [['id', 'ASC']] })
  const [firingLevels, losses, lotLevels] = await Promise.all([
    FiringLevel.findAll({ ...of, attributes: ['firingId', 'factor', 'levelId'] }),
    Loss.findAll({ ...of, attributes: ['lotId', 'fault', 'alsoFaults', 'outcome', 'pieces'] }),
    levelsOfLots(
      networkId,
      lots.map(({ id }) => id),
      transaction,
    ),
  ])
  const levelOf = ({ factor, levelId }: LevelOfFactor): LevelOfFactor => ({ factor, levelId })
  const lossesOf = grouped<Loss, RollupLoss>(
    losses,
    ({ lotId }) => lotId,
    ({ fault, alsoFaults, outcome, pieces }) => ({ fault, also: alsoFaults, outcome, pieces }),
  )
  return {
    levels: grouped(firingLevels, ({ firingId }) => firingId, levelOf),
    lots: grouped(
      lots,
      ({ firingId }) => firingId,
      (lot) => rollupLot(lot, lotLevels.get(lot.id) ?? [], lossesOf.get(lot.id) ?? [], fixed),
    ),
  }
}

/** Further levels by lot, a line a lot: a network has half a dozen times as many levels as lots. */
async function levelsOfLots(
  networkId: number,
  lotIds: readonly number[],
  transaction?: Transaction,
): Promise<Map<number, LevelOfFactor[]>> {
  if (lotIds.length === 0) return new Map()
  const rows = await LotLevel.sequelize!.query<{ lotId: number; levels: string }>(
    `SELECT lot_id AS lotId, GROUP_CONCAT(factor, ':', level_id ORDER BY id) AS levels FROM lot_levels
    WHERE network_id = :networkId AND lot_id IN (:lotIds) GROUP BY lot_id`,
    { replacements: { networkId, lotIds }, type: QueryTypes.SELECT, transaction },
  )
  return new Map(rows.map(({ lotId, levels }) => [lotId, levels.split(',').map(levelOfText)]))
}

function levelOfText(text: string): LevelOfFactor {
  const [factor = '', levelId] = text.split(':')
  return { factor, levelId: Number(levelId) }
}

function rollupLot(
  lot: Lot,
  further: readonly LevelOfFactor[],
  losses: RollupLoss[],
  fixed: FixedLevels,
): RollupLot {
  const levels = [...columnLevels(lot), ...further]
  const of = (factor: string): LevelOfFactor[] => levels.filter((level) => level.factor === factor)
  const codeOf = (factor: string): string | null =>
    fixed.codes.get(of(factor)[0]?.levelId ?? 0) ?? null
  const { pieces, turnedAway, seconds, refires, wasters, undecided, notLookedAt, refireCount } = lot
  return {
    pieces,
    turnedAway,
    seconds,
    refires,
    wasters,
    undecided,
    notLookedAt,
    refireCount,
    forming: codeOf('forming'),
    hasGlaze: hasGlaze(of('glaze').length, codeOf('glaze_sides')),
    hasJoint: hasJoint(of('joining_practice').length),
    levels,
    losses,
  }
}

function columnLevels(lot: Lot): LevelOfFactor[] {
  const columns = lot as unknown as Record<string, number | null>
  return LOT_FACTORS.flatMap(({ id: factor, column }) => {
    const levelId = column === undefined ? null : columns[column]
    return levelId ? [{ factor, levelId }] : []
  })
}
