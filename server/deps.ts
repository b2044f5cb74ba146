import type { Sequelize } from 'sequelize'
import type { Clock } from './clock.js'
import type { Config } from './config.js'
import type { Logger } from './logger.js'

/** What commands, queries and jobs are given by their process. */
export interface Deps {
  sequelize: Sequelize
  clock: Clock
  logger: Logger
  config: Config
}
