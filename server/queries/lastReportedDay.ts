import { Op } from 'sequelize'
import { Firing } from '../models/index.js'
import type { Scope } from '../policies/scope.js'

/** Day of the network's newest reported firing up to that day, or null. */
export async function lastReportedDay(
  { networkId }: Pick<Scope, 'networkId'>,
  upTo: string,
): Promise<string | null> {
  const last = await Firing.findOne({
    where: { networkId, status: 'reported', localDate: { [Op.lte]: upTo } },
    attributes: ['localDate'],
    order: [['localDate', 'DESC']],
    raw: true,
  })
  return last?.localDate ?? null
}
