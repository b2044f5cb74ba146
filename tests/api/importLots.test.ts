import { readFileSync } from 'node:fs'
import { v7 } from 'uuid'
import { describe, expect, it } from 'vitest'
import { fixedClock } from '../../server/clock.js'
import { checkRollups } from '../../server/commands/checkRollups.js'
import { ImportRefused, importLots } from '../../server/commands/importLots.js'
import type { ImportRequest } from '../../server/commands/importLots.js'
import { runStudy } from '../../server/commands/runStudy.js'
import { saveRevision } from '../../server/commands/saveRevision.js'
import { revisionInput } from '../../server/contract/firings.js'
import {
  AuditEvent,
  Finding,
  Firing,
  Kiln,
  Level,
  Loss,
  Lot,
  Network,
  ReportRevision,
  Studio,
} from '../../server/models/index.js'
import { systemScope } from '../../server/queries/scopeFor.js'
import { testDeps } from '../support/deps.js'
import { makeKiln, makeNetwork, makeScope, makeStudio, unique } from '../support/factories.js'

const NOW = '2026-03-04T12:00:00Z'
const deps = () => testDeps({ clock: fixedClock(NOW) })

async function importText(text: string, over: Partial<ImportRequest> = {}) {
  const network = over.network ?? unique('sheet')
  const request = { file: 'lots.csv', text, network, create: { timeZone: 'UTC' }, ...over }
  const summary = await importLots(request, await deps())
  const scope = await systemScope(network)
  return { network, summary, scope, networkId: scope?.networkId ?? 0 }
}

const SHEET = [
  'studio;kiln;firing;kind;date;pieces;clay_body;glaze;cone;opened_at;turned_away;not_looked_at;lost_s_crack;lost_dunt',
  'Quay;North;14;glaze;2026-02-28;10;Buff;Celadon | Fog;6;95;1;2;1;0',
  'Quay;North;14;glaze;2026-02-28;5;"Buff";;6;95;0;0;0;2',
  'Quay;South;3;bisque;2026-03-01;7;Porcelain;;;;0;0;0;0',
].join('\r\n')

describe('importLots', () => {
  it('writes firings as reported, with their lots, counts and losses', async () => {
    const { summary, networkId } = await importText(`\ufeff${SHEET}`)
    expect(summary).toMatchObject({ created: true, firings: 2, lots: 3, pieces: 22, losses: 4 })
    const firing = await Firing.findOne({
      where: { networkId, kind: 'glaze' },
      rejectOnEmpty: true,
    })
    expect(firing).toMatchObject({
      status: 'reported',
      pieces: 15,
      turnedAway: 1,
      wasters: 3,
      notLookedAt: 2,
      about: false,
      cone: '6',
      openingTemperatureC: 95,
      localDate: '2026-02-28',
      packedAt: null,
      revision: 1,
    })
    expect(firing.reportedAt?.toISOString()).toBe('2026-03-04T12:00:00.000Z')
    const lots = await Lot.findAll({
      where: { networkId, firingId: firing.id },
      order: ['position'],
    })
    expect(lots.map(({ isRest, pieces, wasters }) => [isRest, pieces, wasters])).toEqual([
      [false, 10, 1],
      [false, 5, 2],
      [true, 0, 0],
    ])
    const losses = await Loss.findAll({ where: { networkId, firingId: firing.id }, order: ['id'] })
    expect(losses.map(({ fault, outcome, pieces }) => [fault, outcome, pieces])).toEqual([
      ['crack-not-named', 'turned-away', 1],
      ['s-crack', 'waster', 1],
      ['dunt', 'waster', 2],
    ])
  })

  it('makes the studios, kilns and levels that are missing and names them', async () => {
    const { summary, networkId } = await importText(SHEET)
    expect(summary.names).toEqual({
      studios: ['Quay'],
      kilns: [
        { studio: 'Quay', name: 'North' },
        { studio: 'Quay', name: 'South' },
      ],
      levels: ['Buff', 'Celadon', 'Fog', 'Porcelain'].map((name) => ({
        factor: name === 'Buff' || name === 'Porcelain' ? 'clay_body' : 'glaze',
        studio: null,
        name,
      })),
    })
    expect(await Level.count({ where: { networkId, code: null } })).toBe(4)
  })

  it("uses the network's own studio, kiln and level of the same name", async () => {
    const network = await makeNetwork()
    const studio = await makeStudio({ network, name: 'Quáy' })
    const kiln = await makeKiln({ studio, name: 'NORTH' })
    const { networkId } = await importText(SHEET, { network: network.slug })
    expect(await Studio.count({ where: { networkId } })).toBe(1)
    expect(await Kiln.count({ where: { networkId } })).toBe(2)
    expect(await Firing.count({ where: { networkId, kilnId: kiln.id } })).toBe(1)
  })

  it('leaves a history that can be amended like any other', async () => {
    const { networkId, scope } = await importText(SHEET)
    const firing = await Firing.findOne({
      where: { networkId, kind: 'bisque' },
      rejectOnEmpty: true,
    })
    const [first] = await ReportRevision.findAll({ where: { networkId, firingId: firing.id } })
    const sent = revisionInput.parse(first?.payload)
    if (sent.kind !== 'report' || !scope) throw new Error('An import reports.')
    const [lot] = sent.report.lots
    const losses = [
      {
        uid: v7(),
        fault: 's-crack',
        also: [],
        outcome: 'waster' as const,
        pieces: 2,
        neighbour: false,
        features: {},
      },
    ]
    await saveRevision(
      scope,
      {
        firing: firing.uid,
        revision: v7(),
        input: {
          kind: 'amend',
          base: 1,
          deviceTime: null,
          reason: 'Seen later.',
          report: {
            ...sent.report,
            lots: [{ lot: lot?.lot ?? '', notLookedAt: 0, losses }, ...sent.report.lots.slice(1)],
          },
        },
      },
      await deps(),
    )
    const after = await Firing.findOne({ where: { networkId, id: firing.id } })
    expect(after).toMatchObject({ wasters: 2, revision: 2 })
  })

  it('leaves roll-ups that are those of its lots', async () => {
    const { scope } = await importText(SHEET)
    expect(scope && (await checkRollups(scope, await deps()))).toEqual({
      firings: 2,
      differences: 0,
    })
  })

  it('writes nothing when a line is wrong, and says everything that is', async () => {
    const network = unique('sheet')
    const wrong = SHEET.replace('2026-03-01', '2026-03-09').replace(';glaze;2026', ';salt;2026')
    const refused = await importText(wrong, { network }).catch((error: unknown) => error)
    expect(refused).toBeInstanceOf(ImportRefused)
    expect((refused as ImportRefused).problems).toMatchObject([
      { row: 2, column: 'kind' },
      { row: 4, column: 'date' },
    ])
    expect(await Network.count({ where: { slug: network } })).toBe(0)
  })

  it('writes nothing in a dry run, and says what it would do', async () => {
    const network = unique('sheet')
    const { summary } = await importText(SHEET, { network, dryRun: true })
    expect(summary).toMatchObject({ dryRun: true, created: true, firings: 2 })
    expect(await Network.count({ where: { slug: network } })).toBe(0)
  })

  it('needs to be told to make a network', async () => {
    await expect(importText(SHEET, { create: undefined })).rejects.toThrow(/There is no network/)
  })

  it('refuses the same content a second time, unless it is told to', async () => {
    const { network, networkId } = await importText(SHEET)
    await expect(importText(SHEET, { network, file: 'other-name.csv' })).rejects.toThrow(
      /imported on 2026-03-04/,
    )
    expect(await Firing.count({ where: { networkId } })).toBe(2)
    await importText(SHEET, { network, again: true })
    expect(await Firing.count({ where: { networkId } })).toBe(4)
  })

  it('writes down who imported what', async () => {
    const { networkId } = await importText(SHEET)
    const event = await AuditEvent.findOne({
      where: { networkId, action: 'lots.imported' },
      rejectOnEmpty: true,
    })
    expect(event.actorId).toBeNull()
    expect(event.afterState).toMatchObject({
      file: 'lots.csv',
      firings: 2,
      lots: 3,
      hash: expect.stringMatching(/^[0-9a-f]{64}$/),
    })
  })
})

/** Findings of the network's study with q up to 0.01, as fault, names of levels and ratio. */
async function findingsOf(networkId: number) {
  const names = new Map(
    (await Level.findAll({ where: { networkId } })).map(({ id, name }) => [id, name]),
  )
  const findings = await Finding.findAll({
    where: { networkId, studioId: null },
    order: ['qValue'],
  })
  return findings.map(({ fault, levelId, factor, ratio, qValue }) => ({
    fault,
    factor,
    level: names.get(levelId),
    ratio,
    qValue,
  }))
}

describe('the study of an imported sheet', () => {
  it('reports what was planted in the made-up cohort: the drying practice and the clay body', async () => {
    // Made for this purpose; its effects are listed in tests/unit/study/cohort-truth.json.
    const text = readFileSync(new URL('../unit/study/cohort.csv', import.meta.url), 'utf8')
    const { summary, scope, networkId } = await importText(text)
    expect(summary).toMatchObject({ firings: 300, lots: 2451, pieces: 23_769, losses: 3539 })
    if (scope) await runStudy(scope, await deps(), { windowDays: 800 })
    const findings = (await findingsOf(networkId)).filter(({ qValue }) => qValue <= 0.01)
    const raised = (fault: string, level: string) =>
      findings.find((each) => each.fault === fault && each.level === level)
    expect(raised('joint-crack', 'fan dried')?.ratio).toBeGreaterThan(1.5)
    expect(raised('s-crack', 'porcelain')?.ratio).toBeGreaterThan(1.5)
  })

  it('reports the same of the last year of that book with the usual window', async () => {
    const text = readFileSync(new URL('../unit/study/cohort.csv', import.meta.url), 'utf8')
    const { scope, networkId } = await importText(text)
    if (scope) await runStudy(scope, await deps())
    const found = (await findingsOf(networkId))
      .filter(({ qValue }) => qValue <= 0.01)
      .map(({ fault, level }) => `${fault}: ${level}`)
    expect(found).toEqual(expect.arrayContaining(['joint-crack: fan dried', 's-crack: porcelain']))
  })

  it('finds the first period raised in the herds of cattle, as published', async () => {
    // R package lme4, data set cbpp (Lesnoff et al. 2004): a herd stands for a firing, a period for a drying rack.
    const { cases } = JSON.parse(
      readFileSync(new URL('../unit/study/modifiedPoisson.json', import.meta.url), 'utf8'),
    ) as {
      cases: {
        input: {
          response: number[]
          units: number[]
          cluster: string[]
          columns: Record<string, number[]>
        }
      }[]
    }
    const { response = [], units = [], cluster = [], columns = {} } = cases[0]?.input ?? {}
    const lines = response.map((incidence, i) => {
      const period =
        ['period2', 'period3', 'period4'].find((name) => columns[name]?.[i] === 1) ?? 'period1'
      return [cluster[i], period, units[i], incidence].join()
    })
    const { summary, scope, networkId } = await importText(
      ['herd,period,size,incidence', ...lines].join('\n'),
      {
        as: { herd: 'firing', period: 'rack', size: 'pieces', incidence: 'lost_s_crack' },
      },
    )
    expect(summary).toMatchObject({ firings: 15, lots: 56, pieces: 842, losses: 99 })
    if (scope) await runStudy(scope, await deps())
    const first = (await findingsOf(networkId)).find(
      ({ fault, level }) => fault === 's-crack' && level === 'period1',
    )
    // withinStrataTest of the reference values: 2.501.
    expect(first?.ratio).toBeCloseTo(2.501, 3)
    expect(first?.qValue).toBeLessThan(0.05)
  })
})

describe('the scope of an import', () => {
  it('is one network: the same names elsewhere stay as they are', async () => {
    const other = await makeNetwork()
    const studio = await makeStudio({ network: other, name: 'Quay' })
    await importText(SHEET)
    expect(await Kiln.count({ where: { networkId: other.id, studioId: studio.id } })).toBe(0)
    expect((await makeScope(other)).studioIds).toEqual([studio.id])
  })
})
