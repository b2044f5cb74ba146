import { destination, pino, type DestinationStream, type Logger } from 'pino'
import type { LogLevel } from './config.js'

export type { Logger }

const STDERR = 2

/** What must never be written down, wherever it turns up in a logged object. */
const SECRETS = [
  'req.headers.cookie',
  'req.headers.authorization',
  'res.headers["set-cookie"]',
  'password',
  '*.password',
  'token',
  '*.token',
]

/**
 * One JSON line an entry. The server logs to stdout; command-line tools pass `stderr`, so that stdout
 * holds their result alone.
 *
 * @param level entries below it are dropped; `silent` drops all
 */
export function createLogger(level: LogLevel, to: 'stdout' | 'stderr' = 'stdout'): Logger {
  const stream: DestinationStream = destination(to === 'stderr' ? STDERR : 1)
  return pino({ level, base: null, redact: { paths: SECRETS, censor: '(hidden)' } }, stream)
}

/** A logger that keeps quiet, for tests. */
export const silentLogger: Logger = pino({ level: 'silent' })
