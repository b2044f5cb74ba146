import { v7 } from 'uuid'
import { beforeAll, describe, expect, it } from 'vitest'
import { fixedClock } from '../../server/clock.js'
import { checkRollups } from '../../server/commands/checkRollups.js'
import { fill, PATHS } from '../../server/contract/paths.js'
import { revisionInput } from '../../server/contract/firings.js'
import { DEMO_ACCOUNTS } from '../../server/demo/accounts.js'
import { generateDemo } from '../../server/demo/generateDemo.js'
import { DemoThereError, makeDemo } from '../../server/demo/makeDemo.js'
import type { MadeNetwork } from '../../server/demo/makeDemo.js'
import {
  Finding,
  Firing,
  Kiln,
  Level,
  Loss,
  Lot,
  ReportRevision,
} from '../../server/models/index.js'
import type { Scope } from '../../server/policies/index.js'
import { systemScope } from '../../server/queries/scopeFor.js'
import { DEMO_PASSWORD } from '../../server/shared/demo.js'
import { createTestApp, visitor } from '../support/api.js'
import type { Agent, TestApp } from '../support/api.js'

const ENDS = '2026-03-04'
const content = generateDemo({ seed: 1, ends: ENDS })
let world: TestApp
let made: MadeNetwork[]
let ring: Scope

beforeAll(async () => {
  world = await createTestApp({ clock: fixedClock(`${ENDS}T09:00:00Z`), config: { demo: true } })
  made = await makeDemo(world.deps, { seed: 1, ends: ENDS, withStudy: true })
  ring = (await systemScope('kettle-ring')) as Scope
}, 240_000)

async function as(email: string): Promise<Agent> {
  const agent = visitor(world.app)
  await agent.post(PATHS.session).send({ email, password: DEMO_PASSWORD }).expect(200)
  return agent
}

describe('makeDemo', () => {
  it('writes every firing, lot and piece of its content', async () => {
    for (const [index, network] of content.networks.entries()) {
      const scope = (await systemScope(network.slug)) as Scope
      const { networkId } = scope
      expect(made[index]).toMatchObject({ slug: network.slug, firings: network.firings.length })
      expect(await Firing.count({ where: { networkId } })).toBe(network.firings.length)
      expect(await Lot.count({ where: { networkId, isRest: false } })).toBe(
        network.firings.reduce((sum, { lots }) => sum + lots.length, 0),
      )
      expect(await Kiln.count({ where: { networkId } })).toBe(network.kilns.length)
    }
  })

  it('is made once: a second time nothing is written', async () => {
    await expect(makeDemo(world.deps, { seed: 2, ends: ENDS, withStudy: false })).rejects.toThrow(
      DemoThereError,
    )
    expect(await Firing.count({ where: { networkId: ring.networkId } })).toBe(
      content.networks[0]?.firings.length,
    )
  })

  it('leaves counts of firings that are the sums of their losses', async () => {
    const { networkId } = ring
    const firings = await Firing.findAll({
      where: { networkId },
      limit: 200,
      order: [['id', 'DESC']],
      raw: true,
    })
    for (const { id, wasters, refires, seconds, undecided, turnedAway } of firings) {
      const losses = await Loss.findAll({ where: { networkId, firingId: id }, raw: true })
      const sum = (outcome: string) =>
        losses
          .filter((loss) => loss.outcome === outcome)
          .reduce((all, { pieces }) => all + pieces, 0)
      expect([wasters, refires, seconds, undecided, turnedAway]).toEqual(
        ['waster', 'refire', 'second', 'undecided', 'turned-away'].map(sum),
      )
    }
  })

  it('leaves roll-ups that are those of its lots', async () => {
    const pair = (await systemScope('salt-pair')) as Scope
    const { firings, differences } = await checkRollups(pair, world.deps)
    expect(firings).toBe(content.networks[1]?.firings.filter(({ report }) => report).length)
    expect(differences).toBe(0)
  })

  it('leaves revisions that the contract takes', async () => {
    const revisions = await ReportRevision.findAll({
      where: { networkId: ring.networkId },
      limit: 300,
      order: [['id', 'DESC']],
    })
    for (const { kind, payload } of revisions)
      expect(revisionInput.parse(payload)).toMatchObject({ kind })
  })

  it('has a study that finds what was planted', async () => {
    const { networkId } = ring
    const levels = new Map(
      (await Level.findAll({ where: { networkId } })).map(({ id, name }) => [id, name]),
    )
    const kilns = new Map(
      (await Kiln.findAll({ where: { networkId } })).map(({ id, name }) => [id, name]),
    )
    const findings = await Finding.findAll({ where: { networkId, studioId: null } })
    const found = findings
      .filter(({ ratio, qValue }) => qValue <= 0.05 && (ratio === null || ratio > 1))
      .map(({ fault, factor, levelId, pairLevelId }) => {
        const name = factor === 'kiln' ? kilns.get(levelId) : levels.get(levelId)
        return [fault, name, ...(pairLevelId ? [levels.get(pairLevelId)] : [])].join(': ')
      })
    expect(found).toEqual(
      expect.arrayContaining([
        'joint-crack: By the fan',
        'joint-crack: Slip only',
        's-crack: Porcelain',
        'crawling: Dipped unwiped',
        'crazing: Celadon: White stoneware',
        'cooling-dunt: North',
      ]),
    )
  })
})

describe('the accounts of the demo', () => {
  it('are listed on the sign-in page in their order, with the password', async () => {
    const { body } = await visitor(world.app).get(PATHS.session).expect(200)
    const listed = (body as { demo: { email: string; label: string; password: string }[] }).demo
    const ours = listed.filter(({ email }) =>
      DEMO_ACCOUNTS.some((account) => account.email === email),
    )
    expect(ours).toMatchObject(
      DEMO_ACCOUNTS.map(({ email, label }) => ({ email, label, password: DEMO_PASSWORD })),
    )
  })

  it.each(
    DEMO_ACCOUNTS.map(({ email, label, network, roles }) => ({ email, label, network, roles })),
  )('sign in: $label', async ({ email, network, roles }) => {
    const { body } = await (await as(email)).get(PATHS.session).expect(200)
    const { networks } = body as { networks: { slug: string; roles: { role: string }[] }[] }
    expect(networks.map(({ slug }) => slug)).toEqual([network])
    expect(networks[0]?.roles.map(({ role }) => role)).toEqual(roles.map(({ role }) => role))
  })

  it('have loads to report', async () => {
    const { body } = await (
      await as('ines@example.org')
    )
      .get(fill(PATHS.today, { network: 'kettle-ring' }))
      .expect(200)
    expect((body as { toReport: { total: number } }).toReport.total).toBeGreaterThan(0)
  })

  it('see nothing of the other network', async () => {
    const orla = await as('orla@example.org')
    const firing = await Firing.findOne({
      where: { networkId: ring.networkId },
      rejectOnEmpty: true,
    })
    await orla.get(fill(PATHS.firing, { network: 'kettle-ring', firing: firing.uid })).expect(404)
    await orla.get(fill(PATHS.firing, { network: 'salt-pair', firing: firing.uid })).expect(404)
  })

  it('can amend a report of the demo like one of their own', async () => {
    const ines = await as('ines@example.org')
    const list = await ines
      .get(fill(PATHS.firings, { network: 'kettle-ring' }))
      .query({ status: 'reported' })
      .expect(200)
    const [row] = (list.body as { rows: { uid: string; revision: number; wasters: number }[] }).rows
    if (!row) throw new Error('No firing is reported.')
    const { networkId } = ring
    const firing = await Firing.findOne({ where: { networkId, uid: row.uid }, rejectOnEmpty: true })
    const last = await ReportRevision.findOne({
      where: { networkId, firingId: firing.id },
      order: [['number', 'DESC']],
      rejectOnEmpty: true,
    })
    const sent = revisionInput.parse(last.payload)
    if (sent.kind === 'pack') throw new Error('The firing is reported.')
    const body = {
      kind: 'amend',
      base: row.revision,
      deviceTime: null,
      reason: 'Looked again.',
      report: { ...sent.report, note: 'Looked again.' },
    }
    const path = fill(PATHS.firingRevision, {
      network: 'kettle-ring',
      firing: row.uid,
      revision: v7(),
    })
    const { body: after } = await ines.put(path).send(body).expect(200)
    expect(after).toMatchObject({
      revision: row.revision + 1,
      wasters: row.wasters,
      note: 'Looked again.',
    })
  })
})
