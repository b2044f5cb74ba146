import { execFile } from 'node:child_process'
import { describe, expect, it } from 'vitest'
import { jobRun } from '../../server/contract/jobs.js'
import { JobSlot, Study } from '../../server/models/index.js'
import { testDatabaseUrl } from '../support/database.js'
import { makeNetwork, makeStudio } from '../support/factories.js'
import { plantFirings } from '../support/plantedFirings.js'

interface Ended {
  code: number
  stdout: string
  stderr: string
}

/** Runs the tool as `npm run job` does. */
function job(...args: string[]): Promise<Ended> {
  // Vitest has a BASE_URL of its own.
  const env = {
    ...process.env,
    DATABASE_URL: testDatabaseUrl(),
    BASE_URL: 'http://127.0.0.1:3000',
    DATA_DIR: '/nonexistent',
    LOG_LEVEL: 'error',
  }
  return new Promise((resolve) => {
    execFile(
      process.execPath,
      ['--import', 'tsx', 'server/cli/job.ts', ...args],
      { env },
      (error, stdout, stderr) => {
        resolve({ code: error ? Number(error.code) : 0, stdout, stderr })
      },
    )
  })
}

describe('npm run job', () => {
  it('runs the study of a network, with progress on stderr and the outcome alone on stdout', async () => {
    const network = await makeNetwork()
    await plantFirings({
      studio: await makeStudio({ network }),
      firings: 9,
      lastDay: new Date().toISOString().slice(0, 10),
    })
    const { code, stdout, stderr } = await job('study', '--network', network.slug)
    expect(stderr).toMatch(/^study: \d+ %$/m)
    expect(stdout).toBe('9 firings, 18 lots, 1 comparison: 1 finding.\n')
    expect(code).toBe(0)
    expect(await Study.count({ where: { networkId: network.id } })).toBe(1)
    expect(await JobSlot.findOne({ where: { networkId: network.id } })).toMatchObject({
      status: 'done',
      requestedBy: null,
    })
  })

  it('prints the run as JSON', async () => {
    const network = await makeNetwork()
    const { code, stdout } = await job('roll-up', '--network', network.slug, '--json')
    expect(code).toBe(0)
    expect(jobRun.parse(JSON.parse(stdout))).toMatchObject({
      job: 'roll-up',
      status: 'done',
      outcome: 'Counted 0 firings again: all totals are right.',
    })
  })

  it('says which jobs there are, and exits with 2, for one that is not there', async () => {
    const { code, stdout, stderr } = await job('studdy', '--network', 'somewhere')
    expect({ code, stdout }).toEqual({ code: 2, stdout: '' })
    expect(stderr).toMatch(/^There is no job "studdy"; there are study and roll-up\.\nUsage: /)
  })

  it('says which networks there are, and exits with 2, for one that is not there', async () => {
    await makeNetwork()
    const { code, stderr } = await job('study', '--network', 'nowhere')
    expect(code).toBe(2)
    expect(stderr).toMatch(/^There is no network "nowhere"; there are: /)
  })

  it('asks for the network, and refuses options that it does not know', async () => {
    expect(await job('study')).toMatchObject({
      code: 2,
      stderr: expect.stringMatching(/^Say whose with --network SLUG\./),
    })
    expect(await job('study', '--netwerk', 'x')).toMatchObject({
      code: 2,
      stderr: expect.stringMatching(/--netwerk/),
    })
  })
})
