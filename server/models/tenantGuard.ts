import type { Model, ModelStatic } from 'sequelize'

/**
 * The net under the tenant wall: a query on a tenant table whose WHERE does not name one network
 * throws. The gate is `scope`, which every command and query takes first; this hook catches the
 * one that forgot. Work over all networks (migrations, the scheduler) passes `acrossNetworks: true`.
 * Sequelize calls no hook for sum, max, min, aggregate, increment and raw SQL: those live in
 * queries/ and models/ only, which lint enforces.
 */
export class UnscopedQueryError extends Error {
  constructor(model: string) {
    super(`A query on ${model} does not name its network.`)
    this.name = 'UnscopedQueryError'
  }
}

declare module 'sequelize' {
  /* eslint-disable @typescript-eslint/no-unused-vars, @typescript-eslint/no-explicit-any -- as in the package */
  interface FindOptions<TAttributes = any> {
    acrossNetworks?: boolean
  }
  interface CountOptions<TAttributes = any> {
    acrossNetworks?: boolean
  }
  interface UpdateOptions<TAttributes = any> {
    acrossNetworks?: boolean
  }
  interface DestroyOptions<TAttributes = any> {
    acrossNetworks?: boolean
  }
  /* eslint-enable @typescript-eslint/no-unused-vars, @typescript-eslint/no-explicit-any */
}

interface GuardedOptions {
  where?: unknown
  acrossNetworks?: boolean
}

function namesNetwork(where: unknown): boolean {
  if (typeof where !== 'object' || where === null) return false
  // Sequelize has turned attributes into columns already when it asks about a bulk destroy.
  const { networkId, network_id: column } = where as { networkId?: unknown; network_id?: unknown }
  return typeof networkId === 'number' || typeof column === 'number'
}

/** Puts the guard's hooks on a tenant model. */
export function guardTenant(model: ModelStatic<Model>): void {
  const check = (options: GuardedOptions): void => {
    if (options.acrossNetworks !== true && !namesNetwork(options.where)) {
      throw new UnscopedQueryError(model.name)
    }
  }
  model.addHook('beforeFind', (options) => check(options as GuardedOptions))
  model.addHook('beforeCount', (options) => check(options as GuardedOptions))
  model.addHook('beforeBulkUpdate', (options: unknown) => check(options as GuardedOptions))
  model.addHook('beforeBulkDestroy', (options: unknown) => check(options as GuardedOptions))
  // A loaded row carries its network; saving or destroying it repeats the key.
  model.addHook('beforeSave', (row) => {
    if (typeof (row as unknown as { networkId?: unknown }).networkId !== 'number') {
      throw new UnscopedQueryError(model.name)
    }
  })
}
