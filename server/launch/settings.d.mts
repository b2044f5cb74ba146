export declare class SettingError extends Error {
  readonly variable: string
  constructor(variable: string, problem: string)
}

export type LogLevel = 'fatal' | 'error' | 'warn' | 'info' | 'debug' | 'trace' | 'silent'
export declare const LOG_LEVELS: LogLevel[]

export interface Settings {
  port: number
  host: string
  dataDir: string
  databaseUrl: string | null
  dbBufferMb: number
  baseUrl: string
  baseUrlGiven: boolean
  sessionSecret: string | null
  demo: 'on' | 'off' | null
  trustProxy: false | number | string[]
  logLevel: LogLevel
  production: boolean
}

export declare function addressOf(hostName: string, port: number): string
export declare function readSettings(
  env: Record<string, string | undefined>,
  root?: string,
): Settings
