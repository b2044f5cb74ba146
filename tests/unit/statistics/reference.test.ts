/** Every case of every file in reference/: published tables, R and SciPy; each file names its source. */
import { readdirSync, readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { describe, expect, it } from 'vitest'
import { checkReference, type ReferenceFile } from '../../../server/statistics/checkReference.js'
import { deepFreeze } from './deepFreeze.js'

const folder = fileURLToPath(new URL('reference/', import.meta.url))
const files = readdirSync(folder).map(
  (name) => deepFreeze(JSON.parse(readFileSync(folder + name, 'utf8'))) as ReferenceFile,
)

describe.each(files)('$method agrees with $reference', (file) => {
  const result = checkReference(file)

  it('is a method that exists', () => {
    expect(result.status).toBe('checked')
  })

  it.each(result.cases)('$name ($source)', ({ problems }) => {
    expect(problems).toEqual([])
  })
})
