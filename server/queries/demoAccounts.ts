import { QueryTypes } from 'sequelize'
import type { Sequelize } from 'sequelize'

export interface DemoAccountRow {
  label: string
  email: string
  network: string
}

/** Accounts of the demo networks with a label, in the order they were made. */
export function demoAccounts(sequelize: Sequelize): Promise<DemoAccountRow[]> {
  return sequelize.query<DemoAccountRow>(
    `SELECT users.demo_label AS label, users.email, MIN(networks.name) AS network
     FROM users
     JOIN memberships ON memberships.user_id = users.id
     JOIN networks ON networks.id = memberships.network_id AND networks.demo
     WHERE users.demo_label IS NOT NULL
     GROUP BY users.id, users.demo_label, users.email
     ORDER BY users.id`,
    { type: QueryTypes.SELECT },
  )
}
