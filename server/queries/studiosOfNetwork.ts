import { Studio } from '../models/index.js'
import type { Scope } from '../policies/index.js'

/** Studios of the network among `ids`, by name, archived ones too. */
export function studiosOfNetwork({ networkId }: Scope, ids: readonly number[]): Promise<Studio[]> {
  return Studio.findAll({ where: { networkId, id: [...ids] }, order: ['name', 'id'] })
}

/** The studio with this uid, or null. */
export function findStudio({ networkId }: Scope, uid: string): Promise<Studio | null> {
  return Studio.findOne({ where: { networkId, uid } })
}
