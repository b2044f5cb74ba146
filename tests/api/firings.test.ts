import { v7 } from 'uuid'
import { beforeAll, describe, expect, it } from 'vitest'
import { fixedClock } from '../../server/clock.js'
import type { FiringDetail } from '../../server/contract/firings.js'
import { Firing, Loss, Lot, ReportRevision } from '../../server/models/index.js'
import { createTestApp, fill, PATHS, signedIn } from '../support/api.js'
import type { Agent, TestApp } from '../support/api.js'
import {
  fixedLevel,
  makeKiln,
  makeLevel,
  makeNetwork,
  makePerson,
  makeStudio,
} from '../support/factories.js'
import { loadBodies, lossBody, lotBody, makeFiring } from '../support/firings.js'
import type { LoadOver } from '../support/firings.js'

let test: TestApp
beforeAll(async () => {
  test = await createTestApp({ clock: fixedClock('2026-03-04T12:00:00Z') })
})

/** A technician with a kiln, and what they send. */
async function setting() {
  const network = await makeNetwork()
  const studio = await makeStudio({ network })
  const kiln = await makeKiln({ studio })
  const person = await makePerson({ roles: [{ role: 'technician', studio }] })
  const agent = await signedIn(test.app, person)
  return { network, studio, kiln, person, agent, send: sender(agent, network.slug) }
}

function sender(agent: Agent, network: string) {
  return (firing: string, body: object, revision: string = v7()) =>
    agent.put(fill(PATHS.firingRevision, { network, firing, revision })).send(body)
}

type Send = ReturnType<typeof sender>

async function packed(send: Send, over: LoadOver) {
  const firing = v7()
  const bodies = loadBodies(over)
  await send(firing, { kind: 'pack', base: 0, pack: bodies.pack }).expect(200)
  return { firing, ...bodies }
}

async function reported(send: Send, over: LoadOver) {
  const made = await packed(send, over)
  await send(made.firing, { kind: 'report', base: 1, report: made.report }).expect(200)
  return made
}

/** Messages by field of a refusal. */
async function fieldsOf(request: ReturnType<Send>): Promise<Record<string, string>> {
  const { body } = await request.expect(422)
  expect(body.error.code).toBe('invalid')
  return body.error.fields
}

describe('packing', () => {
  it('keeps lots, the rest and pieces turned away', async () => {
    const { network, kiln, person, send } = await setting()
    const mug = await fixedLevel(network, 'form', 'mug')
    const firing = v7()
    const { pack } = loadBodies({
      kiln,
      pieces: 100,
      kilnNumber: 14,
      lots: [
        { pieces: 30, levels: { form: mug }, maker: 'Ana' },
        { pieces: 20, turnedAway: [{ pieces: 2 }] },
      ],
      rest: { turnedAway: [{ pieces: 1 }] },
    })

    const { body } = await send(firing, { kind: 'pack', base: 0, pack }).expect(200)

    expect(body).toMatchObject({
      uid: firing,
      status: 'packed',
      revision: 1,
      kilnNumber: 14,
      pieces: 100,
      turnedAway: 3,
      packedBy: person.name,
      rest: pack.rest,
      reportedAt: null,
    })
    expect(body.lots).toMatchObject([
      {
        isRest: false,
        pieces: 30,
        maker: 'Ana',
        levels: { form: [{ uid: mug.uid, name: 'mugs' }] },
      },
      { isRest: false, pieces: 20, turnedAway: 2, losses: [{ outcome: 'turned-away', pieces: 2 }] },
      { isRest: true, uid: pack.rest, pieces: 50, turnedAway: 1 },
    ])
    expect(body.recorded).toContainEqual({ factor: 'form', share: 0.3 })
    expect(body.recorded).toContainEqual({ factor: 'clay_body', share: 0 })
  })

  it('keeps a rest of no pieces', async () => {
    const { kiln, send } = await setting()
    const { pack } = loadBodies({ kiln, lots: [{ pieces: 12 }] })
    const { body } = await send(v7(), { kind: 'pack', base: 0, pack }).expect(200)
    expect(body.lots[1]).toMatchObject({ isRest: true, pieces: 0 })
  })

  it('corrects the load: lots are kept by uid, added and removed', async () => {
    const { kiln, send } = await setting()
    const { firing, pack } = await packed(send, {
      kiln,
      pieces: 40,
      lots: [{ pieces: 10 }, { pieces: 5 }],
    })
    const [kept] = pack.lots
    const before = await Lot.findOne({ where: { networkId: kiln.networkId, uid: kept?.uid ?? '' } })
    const corrected = { ...pack, lots: [{ ...kept, pieces: 12 }, lotBody({ pieces: 3 })] }

    const { body } = await send(firing, { kind: 'pack', base: 1, pack: corrected }).expect(200)

    expect(body.lots.map((lot: { pieces: number }) => lot.pieces)).toEqual([12, 3, 25])
    const after = await Lot.findOne({ where: { networkId: kiln.networkId, uid: kept?.uid ?? '' } })
    expect(after?.id).toBe(before?.id)
    expect(await Lot.count({ where: { networkId: kiln.networkId } })).toBe(3)
  })

  it('keeps several glazes in the order they were given', async () => {
    const { studio, kiln, send } = await setting()
    const glazes = [
      await makeLevel({ studio, factor: 'glaze' }),
      await makeLevel({ studio, factor: 'glaze' }),
    ]
    const { pack } = loadBodies({
      kiln,
      lots: [{ pieces: 5, levels: { glaze: glazes }, glazeOverlap: true }],
    })
    const { body } = await send(v7(), { kind: 'pack', base: 0, pack }).expect(200)
    expect(body.lots[0].levels.glaze.map(({ uid }: { uid: string }) => uid)).toEqual(
      glazes.map(({ uid }) => uid),
    )
    expect(body.lots[0].glazeOverlap).toBe(true)
  })

  it("takes the class level from the lot's class unless it is given", async () => {
    const { network, studio, kiln, send } = await setting()
    const course = await makeLevel({
      studio,
      factor: 'class',
      attributes: { classLevel: 'first-course' },
    })
    const staff = await fixedLevel(network, 'class_level', 'staff')
    const { pack } = loadBodies({
      kiln,
      lots: [
        { pieces: 5, levels: { class: course } },
        { pieces: 5, levels: { class: course, class_level: staff } },
      ],
    })
    const { body } = await send(v7(), { kind: 'pack', base: 0, pack }).expect(200)
    expect(body.lots[0].levels.class_level).toMatchObject([{ name: 'first course' }])
    expect(body.lots[1].levels.class_level).toMatchObject([{ name: 'staff' }])
  })

  it('keeps levels of the firing', async () => {
    const { network, studio, kiln, send } = await setting()
    const programme = await makeLevel({ studio, factor: 'programme' })
    const fan = await fixedLevel(network, 'cooling', 'fan')
    const { pack } = loadBodies({
      kiln,
      programme: programme.uid,
      cone: '6',
      levels: { cooling: fan.uid },
    })
    const { body } = await send(v7(), { kind: 'pack', base: 0, pack }).expect(200)
    expect(body).toMatchObject({
      programme: { uid: programme.uid },
      cone: '6',
      levels: { cooling: { uid: fan.uid, name: 'fan' } },
    })
  })
})

describe('what a load is checked for', () => {
  it('names every field that cannot be, all at once', async () => {
    const { kiln, send } = await setting()
    const { pack } = loadBodies({
      kiln,
      pieces: 10,
      lots: [{ pieces: 8 }, { pieces: 5, turnedAway: [{ pieces: 7 }] }],
    })
    const fields = await fieldsOf(
      send(v7(), {
        kind: 'pack',
        base: 0,
        pack: { ...pack, localDate: '2026-03-09', programme: v7() },
      }),
    )
    expect(fields).toEqual({
      'pack.pieces': 'The lots hold 13 pieces, 3 more than the firing.',
      'pack.turnedAway.0.pieces': '7 turned away, but the lot has 5 pieces.',
      'pack.localDate': 'This day is still to come.',
      'pack.programme': "Not in this studio's list.",
    })
  })

  it('names fields of the wrong shape by their path', async () => {
    const { kiln, send } = await setting()
    const { pack } = loadBodies({ kiln })
    const fields = await fieldsOf(
      send(v7(), {
        kind: 'pack',
        base: 0,
        pack: { ...pack, pieces: 1.5, lots: [lotBody({ pieces: 0 })] },
      }),
    )
    expect(fields).toEqual({
      'pack.pieces': 'Whole pieces only.',
      'pack.lots.0.pieces': 'At least one piece.',
    })
  })

  it('refuses a day before 2000 and takes tomorrow, which is today somewhere', async () => {
    const { kiln, send } = await setting()
    const { pack } = loadBodies({ kiln })
    const fields = await fieldsOf(
      send(v7(), { kind: 'pack', base: 0, pack: { ...pack, localDate: '1999-12-31' } }),
    )
    expect(fields).toEqual({ 'pack.localDate': 'Before the year 2000: check the year.' })
    await send(v7(), { kind: 'pack', base: 0, pack: { ...pack, localDate: '2026-03-05' } }).expect(
      200,
    )
  })

  it("goes by the day of the kiln's studio", async () => {
    const { network } = await setting()
    const studio = await makeStudio({ network, timeZone: 'Pacific/Kiritimati' })
    const person = await makePerson({ roles: [{ role: 'technician', studio }] })
    const send = sender(await signedIn(test.app, person), network.slug)
    const { pack } = loadBodies({ kiln: await makeKiln({ studio }), localDate: '2026-03-06' })
    await send(v7(), { kind: 'pack', base: 0, pack }).expect(200)
  })

  it('refuses a level of another factor, of another studio and of another network', async () => {
    const { network, kiln, studio, send } = await setting()
    const [wrong, other, foreign] = [
      await makeLevel({ studio, factor: 'glaze' }),
      await makeLevel({ studio: await makeStudio({ network }) }),
      await makeLevel(),
    ]
    const { pack } = loadBodies({
      kiln,
      lots: [wrong, other, foreign].map((level) => ({ pieces: 1, levels: { clay_body: level } })),
    })
    const fields = await fieldsOf(send(v7(), { kind: 'pack', base: 0, pack }))
    const message = "Not in this studio's list."
    expect(fields).toEqual({
      'pack.lots.0.levels.clay_body': message,
      'pack.lots.1.levels.clay_body': message,
      'pack.lots.2.levels.clay_body': message,
    })
  })

  it("takes a level of the network's list", async () => {
    const { network, kiln, send } = await setting()
    const level = await makeLevel({ network })
    const { pack } = loadBodies({ kiln, lots: [{ pieces: 1, levels: { clay_body: level } }] })
    await send(v7(), { kind: 'pack', base: 0, pack }).expect(200)
  })

  it('refuses an archived level, except on the lot that holds it already', async () => {
    const { studio, kiln, send } = await setting()
    const level = await makeLevel({ studio })
    const { firing, pack } = await packed(send, {
      kiln,
      pieces: 20,
      lots: [{ pieces: 5, levels: { clay_body: level } }],
    })
    await level.update({ archivedAt: new Date() })
    await send(firing, { kind: 'pack', base: 1, pack: { ...pack, pieces: 25 } }).expect(200)
    const more = {
      ...pack,
      lots: [...pack.lots, lotBody({ pieces: 1, levels: { clay_body: level } })],
    }
    const fields = await fieldsOf(send(firing, { kind: 'pack', base: 2, pack: more }))
    expect(Object.keys(fields)).toEqual(['pack.lots.1.levels.clay_body'])
    expect(fields['pack.lots.1.levels.clay_body']).toMatch(/^Archived/)
  })

  it('refuses several levels where a lot has one', async () => {
    const { studio, kiln, send } = await setting()
    const bodies = [await makeLevel({ studio }), await makeLevel({ studio })]
    const { pack } = loadBodies({ kiln, lots: [{ pieces: 1, levels: { clay_body: bodies } }] })
    const fields = await fieldsOf(send(v7(), { kind: 'pack', base: 0, pack }))
    expect(fields).toEqual({ 'pack.lots.0.levels.clay_body': 'Choose one.' })
  })

  it('refuses uids that are sent twice or belong to another firing', async () => {
    const { kiln, send } = await setting()
    const other = await packed(send, { kiln, lots: [{ pieces: 4 }] })
    const { pack } = loadBodies({ kiln, lots: [{ pieces: 1 }, { pieces: 1 }, { pieces: 1 }] })
    const [first, second] = pack.lots
    const lots = [
      first,
      { ...second, uid: first?.uid },
      { ...second, uid: other.pack.lots[0]?.uid },
    ]
    const fields = await fieldsOf(send(v7(), { kind: 'pack', base: 0, pack: { ...pack, lots } }))
    expect(Object.keys(fields).sort()).toEqual(['pack.lots.1.uid', 'pack.lots.2.uid'])
  })

  it('does not tell that a uid is in use in another network', async () => {
    const { kiln, send } = await setting()
    const foreign = await makeFiring()
    const { pack } = loadBodies({ kiln, lots: [{ pieces: 4, uid: foreign.pack.lots[0]?.uid }] })
    await send(foreign.firing.uid, { kind: 'pack', base: 0, pack }).expect(200)
    expect(await Firing.count({ where: { uid: foreign.firing.uid }, acrossNetworks: true })).toBe(2)
  })

  it('refuses a kiln of a studio where the person does not work', async () => {
    const { network, send } = await setting()
    const other = await makeKiln({ studio: await makeStudio({ network }) })
    const { pack } = loadBodies({ kiln: other })
    const fields = await fieldsOf(send(v7(), { kind: 'pack', base: 0, pack }))
    expect(fields).toEqual({ 'pack.kiln': 'Choose a kiln of a studio where you work.' })
  })

  it('refuses an archived kiln for a new firing', async () => {
    const { studio, send } = await setting()
    const { pack } = loadBodies({ kiln: await makeKiln({ studio, archivedAt: new Date() }) })
    const fields = await fieldsOf(send(v7(), { kind: 'pack', base: 0, pack }))
    expect(fields).toEqual({ 'pack.kiln': 'This kiln is archived.' })
  })
})

describe('reporting', () => {
  it('counts outcomes by lot and over the firing', async () => {
    const { kiln, person, send } = await setting()
    const { firing, report } = await packed(send, {
      kiln,
      pieces: 60,
      lots: [
        {
          pieces: 20,
          losses: [
            { pieces: 2, fault: 's-crack', also: ['warping'] },
            { pieces: 1, outcome: 'refire', fault: 'crawling' },
          ],
        },
        {
          pieces: 10,
          turnedAway: [{ pieces: 1 }],
          losses: [{ pieces: 3, outcome: 'second', fault: 'pinholing' }],
        },
      ],
      rest: {
        notLookedAt: 4,
        losses: [{ pieces: 1, outcome: 'undecided', fault: 'crack-not-named' }],
      },
      report: { openingTemperatureC: 80 },
    })

    const { body } = await send(firing, { kind: 'report', base: 1, report }).expect(200)

    expect(body).toMatchObject({
      status: 'reported',
      revision: 2,
      turnedAway: 1,
      wasters: 2,
      refires: 1,
      seconds: 3,
      undecided: 1,
      notLookedAt: 4,
      openingTemperatureC: 80,
      reportedBy: person.name,
    })
    expect(body.lots[0]).toMatchObject({ wasters: 2, refires: 1, seconds: 0 })
    expect(body.lots[0].losses[0]).toMatchObject({
      fault: 's-crack',
      also: ['warping'],
      outcome: 'waster',
      pieces: 2,
    })
    expect(body.lots[2]).toMatchObject({ isRest: true, undecided: 1, notLookedAt: 4 })
  })

  it('takes a firing that was never packed, with its load', async () => {
    const { kiln, send } = await setting()
    const firing = v7()
    const { pack, report } = loadBodies({ kiln, pieces: 30 })
    const { body } = await send(firing, { kind: 'report', base: 0, pack, report }).expect(200)
    expect(body).toMatchObject({ status: 'reported', revision: 1, packedAt: null, packedBy: null })
    expect(body.reportedAt).toBe('2026-03-04T12:00:00.000Z')
  })

  it('corrects the load as well when one is sent', async () => {
    const { kiln, send } = await setting()
    const { firing, pack, report } = await packed(send, {
      kiln,
      pieces: 30,
      lots: [{ pieces: 10 }],
    })
    const added = lotBody({ pieces: 5 })
    const { body } = await send(firing, {
      kind: 'report',
      base: 1,
      pack: { ...pack, pieces: 33, lots: [...pack.lots, added] },
      report: {
        ...report,
        lots: [
          ...report.lots,
          { lot: added.uid, notLookedAt: 0, losses: [lossBody({ pieces: 5 })] },
        ],
      },
    }).expect(200)
    expect(body).toMatchObject({ pieces: 33, wasters: 5 })
    expect(body.lots).toHaveLength(3)
  })

  it('never takes more failed than there were', async () => {
    const { kiln, send } = await setting()
    const { firing, report } = await packed(send, {
      kiln,
      lots: [
        { pieces: 5, turnedAway: [{ pieces: 1 }], losses: [{ pieces: 3 }], notLookedAt: 2 },
        { pieces: 5, notLookedAt: 6 },
        { pieces: 5, losses: [{ pieces: 5 }] },
      ],
    })
    const fields = await fieldsOf(send(firing, { kind: 'report', base: 1, report }))
    expect(fields).toEqual({
      'report.lots.0.losses': '3 failed and 2 not looked at of 4 pieces fired.',
      'report.lots.1.notLookedAt': '6 not looked at of 5 pieces fired.',
    })
    expect(await Loss.count({ where: { networkId: kiln.networkId, outcome: 'waster' } })).toBe(0)
  })

  it('wants every lot and the rest', async () => {
    const { kiln, send } = await setting()
    const { firing, report } = await packed(send, {
      kiln,
      pieces: 30,
      lots: [{ pieces: 10 }, { pieces: 10 }],
    })
    const fields = await fieldsOf(
      send(firing, {
        kind: 'report',
        base: 1,
        report: { ...report, lots: report.lots.slice(0, 1) },
      }),
    )
    expect(fields).toEqual({
      'report.lots':
        'Lot 2 and the rest are missing: report each, or say how many were not looked at.',
    })
  })

  it('refuses lots that are not of the firing and lots reported twice', async () => {
    const { kiln, send } = await setting()
    const { firing, report } = await packed(send, { kiln, lots: [{ pieces: 10 }] })
    const [lot, rest] = report.lots
    const lots = [lot, lot, rest, { lot: v7(), notLookedAt: 0, losses: [] }]
    const fields = await fieldsOf(
      send(firing, { kind: 'report', base: 1, report: { ...report, lots } }),
    )
    expect(Object.keys(fields).sort()).toEqual(['report.lots.1.lot', 'report.lots.3.lot'])
  })

  it('refuses a fault that is not in the tree', async () => {
    const { kiln, send } = await setting()
    const { firing, report } = await packed(send, {
      kiln,
      lots: [{ pieces: 10, losses: [{ pieces: 1, fault: 'bad-luck' }] }],
    })
    const fields = await fieldsOf(send(firing, { kind: 'report', base: 1, report }))
    expect(fields).toEqual({ 'report.lots.0.losses.0.fault': 'Not a fault of the tree.' })
  })

  it('takes a loss on a lot that was not at risk of the fault', async () => {
    const { network, kiln, send } = await setting()
    const bare = await fixedLevel(network, 'glaze_sides', 'none')
    const { firing, report } = await packed(send, {
      kiln,
      lots: [
        { pieces: 10, levels: { glaze_sides: bare }, losses: [{ pieces: 1, fault: 'crawling' }] },
      ],
    })
    await send(firing, { kind: 'report', base: 1, report }).expect(200)
  })

  it('keeps that the whole load failed and that a neighbour did it', async () => {
    const { kiln, send } = await setting()
    const { firing, report } = await packed(send, {
      kiln,
      lots: [
        {
          pieces: 10,
          losses: [
            { pieces: 10, fault: 'steam-blowout', neighbour: true, features: { where: ['rim'] } },
          ],
        },
      ],
      report: { wholeLoadFailed: 'probe' },
    })
    const { body } = await send(firing, { kind: 'report', base: 1, report }).expect(200)
    expect(body.wholeLoadFailed).toBe('probe')
    expect(body.lots[0].losses[0]).toMatchObject({ neighbour: true, features: { where: ['rim'] } })
  })

  it('comes once: a second report is told to amend', async () => {
    const { kiln, send } = await setting()
    const { firing, pack, report } = await reported(send, { kiln, pieces: 10 })
    const fields = await fieldsOf(send(firing, { kind: 'report', base: 2, report }))
    expect(fields.kind).toMatch(/amend/)
    const packing = await fieldsOf(send(firing, { kind: 'pack', base: 2, pack }))
    expect(packing.kind).toMatch(/amend/)
  })

  it('wants a load from someone who reports what was never packed', async () => {
    const { kiln, send } = await setting()
    const { report } = loadBodies({ kiln })
    const fields = await fieldsOf(send(v7(), { kind: 'report', base: 0, report }))
    expect(fields).toEqual({ pack: 'Say what went in: this firing was never packed.' })
  })
})

describe('amending', () => {
  it('shows what was counted before and why it changed', async () => {
    const { network, kiln, person, agent, send } = await setting()
    const { firing, report } = await reported(send, {
      kiln,
      pieces: 20,
      rest: { losses: [{ pieces: 2 }] },
    })
    const [rest] = report.lots
    const amended = { ...report, lots: [{ ...rest, losses: [lossBody({ pieces: 5 })] }] }

    const { body } = await send(firing, {
      kind: 'amend',
      base: 2,
      reason: 'three more behind the shelf',
      report: amended,
    }).expect(200)

    expect(body.revisions).toMatchObject([
      { number: 1, kind: 'pack', counts: { pieces: 20, wasters: 0 }, author: person.name },
      { number: 2, kind: 'report', reason: null, counts: { wasters: 2 } },
      { number: 3, kind: 'amend', reason: 'three more behind the shelf', counts: { wasters: 5 } },
    ])
    expect(body.wasters).toBe(5)
    const path = fill(PATHS.firingRevision, { network: network.slug, firing, revision: '2' })
    const { body: earlier } = await agent.get(path).expect(200)
    expect(earlier).toMatchObject({
      number: 2,
      payload: { kind: 'report', report: { lots: [{ losses: [{ pieces: 2 }] }] } },
    })
  })

  it('needs a reason and a report', async () => {
    const { kiln, send } = await setting()
    const { firing, report } = await packed(send, { kiln, pieces: 20 })
    const unsaid = await fieldsOf(send(firing, { kind: 'amend', base: 1, reason: ' ', report }))
    expect(unsaid).toEqual({ reason: 'Say why.' })
    const early = await fieldsOf(send(firing, { kind: 'amend', base: 1, reason: 'slip', report }))
    expect(early.kind).toMatch(/no report/)
  })

  it('can move the firing to another kiln', async () => {
    const { studio, kiln, send } = await setting()
    const right = await makeKiln({ studio })
    const { firing, pack, report } = await reported(send, { kiln, pieces: 20 })
    const { body } = await send(firing, {
      kind: 'amend',
      base: 2,
      reason: 'wrong kiln',
      pack: { ...pack, kiln: right.uid },
      report,
    }).expect(200)
    expect(body.kiln.uid).toBe(right.uid)
  })
})

describe('what is sent twice or at once', () => {
  it('answers a repeat as the first time and keeps one revision', async () => {
    const { kiln, send } = await setting()
    const { pack } = loadBodies({ kiln, pieces: 20 })
    const [firing, revision] = [v7(), v7()]
    const first = await send(firing, { kind: 'pack', base: 0, pack }, revision).expect(200)
    const again = await send(firing, { base: 0, pack, kind: 'pack' }, revision).expect(200)
    expect(again.body).toEqual(first.body)
    expect(await ReportRevision.count({ where: { networkId: kiln.networkId } })).toBe(1)
  })

  it('answers a repeat after the firing has moved on', async () => {
    const { kiln, send } = await setting()
    const { pack, report } = loadBodies({ kiln, pieces: 20 })
    const [firing, revision] = [v7(), v7()]
    await send(firing, { kind: 'pack', base: 0, pack }, revision).expect(200)
    await send(firing, { kind: 'report', base: 1, report }).expect(200)
    const { body } = await send(firing, { kind: 'pack', base: 0, pack }, revision).expect(200)
    expect(body).toMatchObject({ status: 'reported', revision: 2 })
  })

  it('refuses another body or another firing under the same uid', async () => {
    const { kiln, send } = await setting()
    const { pack } = loadBodies({ kiln, pieces: 20 })
    const [firing, revision] = [v7(), v7()]
    await send(firing, { kind: 'pack', base: 0, pack }, revision).expect(200)
    const other = await send(
      firing,
      { kind: 'pack', base: 0, pack: { ...pack, pieces: 21 } },
      revision,
    ).expect(409)
    expect(other.body.error.code).toBe('different-body')
    const elsewhere = await send(
      v7(),
      { kind: 'pack', base: 0, pack: loadBodies({ kiln }).pack },
      revision,
    ).expect(409)
    expect(elsewhere.body.error.code).toBe('different-body')
  })

  it('refuses a stale base with the number of the present revision', async () => {
    const { kiln, send } = await setting()
    const { firing, report } = await reported(send, { kiln, pieces: 20 })
    const { body } = await send(firing, { kind: 'report', base: 1, report }).expect(409)
    expect(body.error).toMatchObject({ code: 'stale', details: { revision: 2 } })
  })

  it('lets one of two amendments at once through', async () => {
    const { kiln, send } = await setting()
    const { firing, report } = await reported(send, { kiln, pieces: 20 })
    const amend = (reason: string) => send(firing, { kind: 'amend', base: 2, reason, report })
    const answers = await Promise.all([amend('one'), amend('two')])
    expect(answers.map(({ status }) => status).sort()).toEqual([200, 409])
    expect(answers.find(({ status }) => status === 409)?.body.error).toMatchObject({
      code: 'stale',
      details: { revision: 3 },
    })
  })

  it('makes one revision of the same one sent six times at once', async () => {
    const { kiln, send } = await setting()
    const { pack } = loadBodies({ kiln, pieces: 20, lots: [{ pieces: 5 }] })
    const [firing, revision] = [v7(), v7()]
    const answers = await Promise.all(
      Array.from({ length: 6 }, () => send(firing, { kind: 'pack', base: 0, pack }, revision)),
    )
    expect(answers.map(({ status }) => status)).toEqual([200, 200, 200, 200, 200, 200])
    expect(await ReportRevision.count({ where: { networkId: kiln.networkId } })).toBe(1)
    expect(await Lot.count({ where: { networkId: kiln.networkId } })).toBe(2)
  })

  it('takes many firings of one kiln at once', async () => {
    const { kiln, send } = await setting()
    const send1 = () => {
      const { pack, report } = loadBodies({
        kiln,
        pieces: 20,
        lots: [{ pieces: 10, losses: [{ pieces: 2 }] }],
      })
      return send(v7(), { kind: 'report', base: 0, pack, report })
    }
    const answers = await Promise.all(Array.from({ length: 8 }, send1))
    expect(answers.map(({ status }) => status)).toEqual(Array(8).fill(200))
  })
})

describe('voiding', () => {
  async function owner() {
    const made = await setting()
    const person = await makePerson({ roles: [{ role: 'owner', studio: made.studio }] })
    const agent = await signedIn(test.app, person)
    const path = (firing: string) => fill(PATHS.firingVoid, { network: made.network.slug, firing })
    return { ...made, agent, send: sender(agent, made.network.slug), path, technician: made.agent }
  }

  it('keeps the firing and its counts, with the reason, and takes no more revisions', async () => {
    const { kiln, agent, send, path } = await owner()
    const { firing, report } = await reported(send, {
      kiln,
      pieces: 20,
      rest: { losses: [{ pieces: 2 }] },
    })
    const { body } = await agent
      .post(path(firing))
      .send({ base: 2, reason: 'entered twice' })
      .expect(200)
    expect(body).toMatchObject({
      status: 'void',
      voidReason: 'entered twice',
      wasters: 2,
      revision: 3,
    })
    expect(body.revisions[2]).toMatchObject({
      kind: 'void',
      reason: 'entered twice',
      counts: { wasters: 2 },
    })
    const fields = await fieldsOf(send(firing, { kind: 'amend', base: 3, reason: 'x', report }))
    expect(fields).toEqual({ kind: 'This firing is void.' })
  })

  it('is for owners, and not on a stale base', async () => {
    const { kiln, agent, technician, send, path } = await owner()
    const { firing } = await reported(send, { kiln, pieces: 20 })
    await technician.post(path(firing)).send({ base: 2, reason: 'entered twice' }).expect(403)
    const { body } = await agent
      .post(path(firing))
      .send({ base: 1, reason: 'entered twice' })
      .expect(409)
    expect(body.error).toMatchObject({ code: 'stale', details: { revision: 2 } })
  })
})

describe('who sees what', () => {
  it('answers 404 for a firing of another studio and of another network', async () => {
    const { network, kiln, send } = await setting()
    const { firing, pack } = await packed(send, { kiln, pieces: 20 })
    const strangers = [await makePerson({ network }), await makePerson()]
    for (const stranger of strangers) {
      const agent = await signedIn(test.app, stranger)
      await agent.get(fill(PATHS.firing, { network: network.slug, firing })).expect(404)
      await agent
        .get(fill(PATHS.firingRevision, { network: network.slug, firing, revision: '1' }))
        .expect(404)
      await sender(agent, network.slug)(firing, { kind: 'pack', base: 1, pack }).expect(404)
    }
    expect(await ReportRevision.count({ where: { networkId: kiln.networkId } })).toBe(1)
  })

  it('keeps makers, notes and names of people in the studio', async () => {
    const { network, kiln, send } = await setting()
    const { firing } = await reported(send, {
      kiln,
      pieces: 20,
      note: 'elements tired',
      lots: [{ pieces: 5, maker: 'Ana', note: 'wet' }],
    })
    const lead = await signedIn(
      test.app,
      await makePerson({ network, roles: [{ role: 'education-lead' }] }),
    )

    const { body } = await lead
      .get(fill(PATHS.firing, { network: network.slug, firing }))
      .expect(200)

    expect(body).toMatchObject({ note: null, packedBy: null, reportedBy: null })
    expect(body.lots[0]).toMatchObject({ maker: null, note: null })
    const path = fill(PATHS.firingRevision, { network: network.slug, firing, revision: '1' })
    const { body: revision } = await lead.get(path).expect(200)
    expect(JSON.stringify(revision)).not.toMatch(/Ana|wet|tired/)
  })

  it('puts no name beside a hot opening', async () => {
    const { network, kiln, agent, send } = await setting()
    const { firing } = await reported(send, {
      kiln,
      pieces: 20,
      report: { openingTemperatureC: 180 },
    })
    const { body } = await agent
      .get(fill(PATHS.firing, { network: network.slug, firing }))
      .expect(200)
    expect(body.reportedBy).toBeNull()
    expect(body.revisions[1].author).toBeNull()
  })

  it('refuses writes of those who only read', async () => {
    const { network, kiln } = await setting()
    const lead = await signedIn(
      test.app,
      await makePerson({ network, roles: [{ role: 'education-lead' }] }),
    )
    await sender(lead, network.slug)(v7(), {
      kind: 'pack',
      base: 0,
      pack: loadBodies({ kiln }).pack,
    }).expect(403)
  })
})

describe('as last time', () => {
  it('is the newest firing of the kiln and kind that is not void', async () => {
    const { network, kiln, agent, send } = await setting()
    const wanted = await packed(send, { kiln, pieces: 20, localDate: '2026-03-01' })
    await packed(send, { kiln, pieces: 21, localDate: '2026-02-01' })
    await packed(send, { kiln, pieces: 22, kind: 'bisque', localDate: '2026-03-03' })
    const path = fill(PATHS.lastFiring, { network: network.slug })
    const { body } = await agent.get(path).query({ kiln: kiln.uid, kind: 'glaze' }).expect(200)
    expect((body.firing as FiringDetail).uid).toBe(wanted.firing)
    const none = await agent.get(path).query({ kiln: kiln.uid, kind: 'raku' }).expect(200)
    expect(none.body.firing).toBeNull()
  })

  it('is not there for a kiln that the person may not see', async () => {
    const { network, agent } = await setting()
    const other = await makeKiln({ studio: await makeStudio({ network }) })
    await agent
      .get(fill(PATHS.lastFiring, { network: network.slug }))
      .query({ kiln: other.uid, kind: 'glaze' })
      .expect(404)
  })
})
