import { createConnection } from 'mariadb'
import type { Connection } from 'mariadb'

/** Connects to the MariaDB of an address without a schema, which the connector's own parser refuses. */
export function connectToServer(url: string): Promise<Connection> {
  const { hostname, port, username, password } = new URL(url)
  return createConnection({
    host: hostname,
    port: Number(port || 3306),
    user: decodeURIComponent(username),
    password: decodeURIComponent(password),
  })
}
