import { describe, expect, it } from 'vitest'
import { fixedLevel, makeLevel, makeStudio } from '../support/factories.js'
import { LEVEL, PATHS, setting } from '../support/settings.js'
import { useLevels } from '../support/useLevels.js'

describe('lists of levels', () => {
  it("show the network's and the studio's own entries", async () => {
    const { owner, at, studio, network } = await setting()
    const [common, mine] = [await makeLevel({ network }), await makeLevel({ studio })]
    const foreign = await makeLevel({ studio: await makeStudio({ network }) })
    const { body } = await owner.get(at(PATHS.levels)).query({ factor: 'clay_body' }).expect(200)
    const uids = body.rows.map(({ uid }: { uid: string }) => uid)
    expect(uids.sort()).toEqual([common.uid, mine.uid].sort())
    expect(uids).not.toContain(foreign.uid)
    const views = Object.fromEntries(body.rows.map((row: { uid: string }) => [row.uid, row]))
    expect(views[common.uid]).toMatchObject({
      studio: null,
      abilities: { 'catalogue.edit': false },
    })
    expect(views[mine.uid]).toMatchObject({
      studio: { uid: studio.uid },
      abilities: { 'catalogue.edit': true },
    })
  })

  it('take several factors, fixed entries in their order first', async () => {
    const { owner, at, studio } = await setting()
    await makeLevel({ studio, factor: 'form', name: 'aaa', position: 1000 })
    const { body } = await owner.get(at(PATHS.levels)).query({ factor: 'form,glaze' }).expect(200)
    const names = body.rows.map(({ name }: { name: string }) => name)
    expect(names.slice(0, 2)).toEqual(['mugs', 'bowls'])
    expect(names.at(-1)).toBe('aaa')
  })

  it('leave archived entries out unless asked', async () => {
    const { owner, at, studio } = await setting()
    const level = await makeLevel({ studio })
    await owner
      .put(at(PATHS.levelArchived, { level: level.uid }))
      .send({ archived: true })
      .expect(200)
    const list = async (archived: string) =>
      (await owner.get(at(PATHS.levels)).query({ factor: 'clay_body', archived })).body
        .rows as object[]
    expect(await list('false')).toHaveLength(0)
    expect(await list('true')).toHaveLength(1)
  })

  it('keep what counts for the factor and drop the rest', async () => {
    const { owner, at, studio } = await setting()
    const attributes = {
      family: 'stoneware',
      cone: '6',
      foodUse: 'tested',
      description: ' smooth ',
    }
    const { body } = await owner
      .post(at(PATHS.levels))
      .send({ ...LEVEL, name: 'Grey stoneware', studio: studio.uid, attributes })
      .expect(201)
    expect(body.attributes).toEqual({ family: 'stoneware', cone: '6', description: 'smooth' })
  })

  it("of the network are the admin's to change, not the owner's", async () => {
    const { owner, admin, at } = await setting()
    const input = { ...LEVEL, name: 'White', studio: null }
    await owner.post(at(PATHS.levels)).send(input).expect(403)
    const { body } = await admin.post(at(PATHS.levels)).send(input).expect(201)
    expect(body.studio).toBeNull()
    const level = body.uid as string
    await owner
      .patch(at(PATHS.level, { level }))
      .send({ ...input, name: 'Off-white' })
      .expect(403)
    await owner.put(at(PATHS.levelArchived, { level })).send({ archived: true }).expect(403)
    await admin
      .patch(at(PATHS.level, { level }))
      .send({ ...input, name: 'Off-white' })
      .expect(200)
  })

  it('have names of their own in each list', async () => {
    const { owner, admin, at, studio } = await setting()
    await admin
      .post(at(PATHS.levels))
      .send({ ...LEVEL, name: 'White', studio: null })
      .expect(201)
    await owner
      .post(at(PATHS.levels))
      .send({ ...LEVEL, name: 'White', studio: studio.uid })
      .expect(201)
    await owner
      .post(at(PATHS.levels))
      .send({ ...LEVEL, factor: 'glaze', name: 'White', studio: studio.uid })
      .expect(201)
    const again = await owner
      .post(at(PATHS.levels))
      .send({ ...LEVEL, name: 'white', studio: studio.uid })
      .expect(409)
    expect(again.body.error.fields).toHaveProperty('name')
  })

  it('have one reference practice each: a new one takes the place of the old', async () => {
    const { owner, at, studio, network } = await setting()
    const elsewhere = await makeLevel({ network, factor: 'drying_practice', isReference: true })
    const input = { ...LEVEL, factor: 'drying_practice', studio: studio.uid, isReference: true }
    const first = await owner
      .post(at(PATHS.levels))
      .send({ ...input, name: 'Under plastic' })
      .expect(201)
    const second = await owner
      .post(at(PATHS.levels))
      .send({ ...input, name: 'Open rack' })
      .expect(201)
    const references = async () => {
      const { body } = await owner.get(at(PATHS.levels)).query({ factor: 'drying_practice' })
      return (body.rows as { uid: string; isReference: boolean }[])
        .filter((row) => row.isReference)
        .map(({ uid }) => uid)
    }
    expect((await references()).sort()).toEqual([elsewhere.uid, second.body.uid].sort())
    await owner
      .patch(at(PATHS.level, { level: first.body.uid }))
      .send({ ...input, name: 'Under plastic' })
      .expect(200)
    expect((await references()).sort()).toEqual([elsewhere.uid, first.body.uid].sort())
    await owner
      .put(at(PATHS.levelArchived, { level: first.body.uid }))
      .send({ archived: true })
      .expect(200)
    expect(await references()).toEqual([elsewhere.uid])
  })

  it('have no reference where the entries are no practices', async () => {
    const { owner, at, studio } = await setting()
    const { body } = await owner
      .post(at(PATHS.levels))
      .send({ ...LEVEL, name: 'White', studio: studio.uid, isReference: true })
      .expect(422)
    expect(body.error.fields).toHaveProperty('isReference')
  })

  it('turn a class away that ends before it starts', async () => {
    const { owner, at, studio } = await setting()
    const attributes = { classLevel: 'first-course', startsOn: '2026-03-01', endsOn: '2026-02-01' }
    const { body } = await owner
      .post(at(PATHS.levels))
      .send({ ...LEVEL, factor: 'class', name: 'Mondays', studio: studio.uid, attributes })
      .expect(422)
    expect(Object.keys(body.error.fields)).toEqual(['attributes.endsOn'])
  })

  it('that the studio does not keep cannot be added to or archived', async () => {
    const { admin, at, network } = await setting()
    const input = { ...LEVEL, factor: 'forming', name: 'knitted', studio: null }
    const { body } = await admin.post(at(PATHS.levels)).send(input).expect(422)
    expect(body.error.fields).toHaveProperty('factor')
    const thrown = await fixedLevel(network, 'forming', 'thrown')
    await admin
      .put(at(PATHS.levelArchived, { level: thrown.uid }))
      .send({ archived: true })
      .expect(422)
  })

  it('keep an entry in its list', async () => {
    const { admin, at, studio } = await setting()
    const level = await makeLevel({ studio })
    const { body } = await admin
      .patch(at(PATHS.level, { level: level.uid }))
      .send({ ...LEVEL, factor: 'glaze', name: 'White', studio: null })
      .expect(422)
    expect(Object.keys(body.error.fields).sort()).toEqual(['factor', 'studio'])
  })

  it('count the lots that name an entry, whatever way they do', async () => {
    const { owner, at, studio } = await setting()
    const [body1, glaze, programme] = [
      await makeLevel({ studio }),
      await makeLevel({ studio, factor: 'glaze' }),
      await makeLevel({ studio, factor: 'programme' }),
    ]
    await useLevels(studio, { clayBodyId: body1.id, glazeId: glaze.id, programmeId: programme.id })
    const { body } = await owner
      .get(at(PATHS.levels))
      .query({ factor: 'clay_body,glaze,programme,rack' })
    const uses = Object.fromEntries(
      body.rows.map((row: { uid: string; uses: number }) => [row.uid, row.uses]),
    )
    expect(uses).toEqual({ [body1.uid]: 2, [glaze.uid]: 2, [programme.uid]: 1 })
  })
})
