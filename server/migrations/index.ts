import type { Sequelize } from 'sequelize'
import { initial } from './0001-initial.js'

export interface Migration {
  name: string
  up: (params: { context: Sequelize }) => Promise<void>
}

/** All migrations, oldest first: a static list, so that a bundle holds them. */
export const migrations: readonly Migration[] = [initial]
