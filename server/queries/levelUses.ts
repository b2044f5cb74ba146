import { QueryTypes } from 'sequelize'
import type { Sequelize } from 'sequelize'
import type { Scope } from '../policies/index.js'
import { FACTORS } from '../shared/factors.js'
import type { Factor } from '../shared/factors.js'

/** `formId` is the column `form_id`. Only the registry's own names come here. */
const columnName = (attribute: string) =>
  attribute.replace(/[A-Z]/g, (capital) => `_${capital.toLowerCase()}`)

/** Pairs of a level and what names it; a lot that names a level twice counts once. */
function usesOf({ id, of, column }: Factor): string[] {
  const parts = []
  if (column) {
    const name = columnName(column)
    parts.push(`SELECT ${name} AS level, id AS named_by FROM lots
      WHERE network_id = :networkId AND ${name} IS NOT NULL`)
  }
  if (id === 'programme') {
    parts.push(`SELECT programme_id AS level, id AS named_by FROM firings
      WHERE network_id = :networkId AND programme_id IS NOT NULL`)
  }
  const table = of === 'lot' ? 'lot' : 'firing'
  parts.push(`SELECT level_id AS level, ${table}_id AS named_by FROM ${table}_levels
    WHERE network_id = :networkId AND factor = '${id}'`)
  return parts
}

/**
 * How many lots (of a lot's factor) or firings (of a firing's) name each level of these factors: one
 * query, whatever the number of levels.
 * @returns by level id; a level that nothing names is missing
 */
export async function levelUses(
  { networkId }: Scope,
  factors: readonly string[],
  sequelize: Sequelize,
): Promise<Map<number, number>> {
  const wanted = FACTORS.filter(({ id }) => factors.includes(id))
  if (wanted.length === 0) return new Map()
  const counts = wanted.map(
    (factor) => `SELECT level, COUNT(*) AS uses FROM (
      ${usesOf(factor).join(' UNION ')}
    ) AS of_${factor.id} GROUP BY level`,
  )
  const rows = await sequelize.query<{ level: number; uses: number }>(counts.join(' UNION ALL '), {
    type: QueryTypes.SELECT,
    replacements: { networkId },
  })
  return new Map(rows.map(({ level, uses }) => [level, Number(uses)]))
}
