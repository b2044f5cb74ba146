import { readFileSync } from 'node:fs'

/** The version of this code, from package.json in the working directory. */
export const VERSION: string = (
  JSON.parse(readFileSync('package.json', 'utf8')) as { version: string }
).version
