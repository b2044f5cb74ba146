import { describe, expect, it } from 'vitest'
import { makeKiln, makeStudio } from '../support/factories.js'
import { audits, KILN, PATHS, setting, STUDIO } from '../support/settings.js'

describe('studios', () => {
  it('are made by an admin with a slug of their name and the next letter', async () => {
    const { admin, at, network } = await setting()
    const first = await admin
      .post(at(PATHS.studios))
      .send({ ...STUDIO, name: 'Café & Kiln' })
      .expect(201)
    const second = await admin
      .post(at(PATHS.studios))
      .send({ ...STUDIO, name: 'Cafe Kiln' })
      .expect(201)
    expect(first.body).toMatchObject({ slug: 'cafe-kiln', letter: 'B', kilns: 0, archivedAt: null })
    expect(second.body).toMatchObject({ slug: 'cafe-kiln-2', letter: 'C' })
    expect(await audits(network.id)).toEqual([
      { action: 'studio.created', subject_uid: first.body.uid },
      { action: 'studio.created', subject_uid: second.body.uid },
    ])
  })

  it('made at once get slugs and letters of their own', async () => {
    const { admin, at } = await setting()
    const names = ['Mill Lane', 'Mill-Lane', 'Mill  Lane!', 'mill lane?']
    const answers = await Promise.all(
      names.map((name) =>
        admin
          .post(at(PATHS.studios))
          .send({ ...STUDIO, name })
          .expect(201),
      ),
    )
    const of = (key: string) => answers.map(({ body }) => body[key]).sort()
    expect(of('slug')).toEqual(['mill-lane', 'mill-lane-2', 'mill-lane-3', 'mill-lane-4'])
    expect(of('letter')).toEqual(['B', 'C', 'D', 'E'])
  })

  it('have names of their own in the network, accents and case aside', async () => {
    const { admin, at, network } = await setting()
    await admin
      .post(at(PATHS.studios))
      .send({ ...STUDIO, name: 'Café' })
      .expect(201)
    const { body } = await admin
      .post(at(PATHS.studios))
      .send({ ...STUDIO, name: 'CAFE' })
      .expect(409)
    expect(body.error).toMatchObject({ code: 'taken', fields: { name: expect.any(String) } })
    expect(await audits(network.id)).toHaveLength(1)
  })

  it('may have the name of a studio of another network', async () => {
    const [here, there] = [await setting(), await setting()]
    for (const { admin, at } of [here, there]) {
      await admin.post(at(PATHS.studios)).send(STUDIO).expect(201)
    }
  })

  it('are changed by their owner and keep slug and letter', async () => {
    const { owner, at, studio } = await setting()
    const path = at(PATHS.studio, { studio: studio.uid })
    const change = {
      ...STUDIO,
      name: 'Renamed',
      timeZone: 'America/Denver',
      currency: 'USD',
      temperatureUnit: 'F',
    }
    const { body } = await owner.patch(path).send(change).expect(200)
    expect(body).toMatchObject({ ...change, slug: studio.slug, letter: 'A' })
  })

  it('say beside each field what is wrong with it', async () => {
    const { admin, at } = await setting()
    const bad = { ...STUDIO, name: ' ', timeZone: 'Mars/Olympus', currency: 'euro' }
    const { body } = await admin.post(at(PATHS.studios)).send(bad).expect(422)
    expect(Object.keys(body.error.fields).sort()).toEqual(['currency', 'name', 'timeZone'])
  })

  it('are archived and brought back, once each', async () => {
    const { owner, at, studio, network } = await setting()
    const path = at(PATHS.studioArchived, { studio: studio.uid })
    for (const archived of [true, true, false]) await owner.put(path).send({ archived }).expect(200)
    const { body } = await owner.get(at(PATHS.studios))
    expect(body.rows[0].archivedAt).toBeNull()
    expect((await audits(network.id)).map(({ action }) => action)).toEqual([
      'studio.archived',
      'studio.restored',
    ])
  })

  it('of others in the network are not listed for who has no part in them', async () => {
    const { owner, at, studio, network } = await setting()
    const other = await makeStudio({ network })
    const { body } = await owner.get(at(PATHS.studios)).expect(200)
    expect(body.rows.map(({ uid }: { uid: string }) => uid)).toEqual([studio.uid])
    await owner
      .patch(at(PATHS.studio, { studio: other.uid }))
      .send(STUDIO)
      .expect(404)
  })

  it('count their kilns in use', async () => {
    const { owner, at, studio } = await setting()
    await makeKiln({ studio })
    await makeKiln({ studio, archivedAt: new Date('2026-01-01T00:00:00Z') })
    expect((await owner.get(at(PATHS.studios))).body.rows[0].kilns).toBe(1)
  })
})

describe('kilns', () => {
  it("are added, changed and archived by the studio's owner", async () => {
    const { owner, at, studio, network } = await setting()
    const made = await owner
      .post(at(PATHS.kilns))
      .send({ ...KILN, studio: studio.uid })
      .expect(201)
    expect(made.body).toMatchObject({
      ...KILN,
      studio: { uid: studio.uid },
      abilities: { 'kilns.edit': true },
    })
    const kiln = made.body.uid as string
    const changed = await owner
      .patch(at(PATHS.kiln, { kiln }))
      .send({ ...KILN, studio: studio.uid, heat: 'gas', litres: null, note: 'Slow to cool' })
      .expect(200)
    expect(changed.body).toMatchObject({ heat: 'gas', litres: null, note: 'Slow to cool' })
    const gone = await owner
      .put(at(PATHS.kilnArchived, { kiln }))
      .send({ archived: true })
      .expect(200)
    expect(gone.body.archivedAt).not.toBeNull()
    expect((await audits(network.id)).map(({ action }) => action)).toEqual([
      'kiln.created',
      'kiln.changed',
      'kiln.archived',
    ])
  })

  it('stay in their studio', async () => {
    const { admin, at, studio, network } = await setting()
    const kiln = await makeKiln({ studio })
    const other = await makeStudio({ network })
    const { body } = await admin
      .patch(at(PATHS.kiln, { kiln: kiln.uid }))
      .send({ ...KILN, studio: other.uid })
      .expect(422)
    expect(body.error.fields).toHaveProperty('studio')
  })

  it('have names of their own in the studio', async () => {
    const { owner, at, studio } = await setting()
    await makeKiln({ studio, name: KILN.name })
    const { body } = await owner
      .post(at(PATHS.kilns))
      .send({ ...KILN, studio: studio.uid })
      .expect(409)
    expect(body.error.fields).toHaveProperty('name')
  })

  it('are not added to an archived studio', async () => {
    const { owner, at, studio } = await setting()
    await studio.update({ archivedAt: new Date('2026-01-01T00:00:00Z') })
    const { body } = await owner
      .post(at(PATHS.kilns))
      .send({ ...KILN, studio: studio.uid })
      .expect(422)
    expect(body.error.fields).toHaveProperty('studio')
  })

  it('have sensible sizes', async () => {
    const { owner, at, studio } = await setting()
    const bad = { ...KILN, studio: studio.uid, litres: -3, shelves: 1.5 }
    const { body } = await owner.post(at(PATHS.kilns)).send(bad).expect(422)
    expect(Object.keys(body.error.fields).sort()).toEqual(['litres', 'shelves'])
  })
})
