import { describe, expect, it } from 'vitest'
import { fixedClock } from '../../server/clock.js'
import { makeLink } from '../../server/commands/oneTimeLinks.js'
import { inTransaction } from '../../server/database/inTransaction.js'
import { createTestApp, fill, ORIGIN, PATHS, signedIn, testDeps, visitor } from '../support/api.js'
import { makeNetwork, makePerson } from '../support/factories.js'
import { rowsOf } from '../support/rows.js'

const password = 'seven grey saggars'
const BEFORE = '2026-03-04T10:00:00Z'

/** The token of a new link for the person, made at `at`. */
async function linkFor(
  person: { id: number },
  { at = BEFORE, networkId = null as number | null } = {},
) {
  const deps = await testDeps({ clock: fixedClock(at) })
  const link = { kind: 'invite', userId: person.id, networkId, createdBy: null } as const
  const { url } = await inTransaction(deps.sequelize, (own) => makeLink(link, deps, own))
  expect(url).toMatch(new RegExp(`^${ORIGIN}/invite/`))
  return url.split('/').at(-1) ?? ''
}

const at = (moment: string) => createTestApp({ clock: fixedClock(moment) })
const path = (token: string) => fill(PATHS.link, { token })

describe('a one-time link', () => {
  it('says whom it is for before it is used', async () => {
    const { app } = await at(BEFORE)
    const network = await makeNetwork()
    const person = await makePerson({ network, password: null })
    const token = await linkFor(person, { networkId: network.id })
    const { body } = await visitor(app).get(path(token)).expect(200)
    expect(body).toEqual({ name: person.name, email: person.email, networkName: network.name })
  })

  it('sets the password and signs the person in', async () => {
    const { app } = await at(BEFORE)
    const person = await makePerson({ password: null })
    const agent = visitor(app)
    const { body } = await agent
      .post(path(await linkFor(person)))
      .send({ password })
      .expect(200)
    expect(body.user.uid).toBe(person.uid)
    expect((await agent.get(PATHS.session)).body.user.uid).toBe(person.uid)
    await visitor(app).post(PATHS.session).send({ email: person.email, password }).expect(200)
  })

  it('works once', async () => {
    const { app } = await at(BEFORE)
    const token = await linkFor(await makePerson({ password: null }))
    await visitor(app).post(path(token)).send({ password }).expect(200)
    await visitor(app)
      .post(path(token))
      .send({ password: `${password} again` })
      .expect(404)
    await visitor(app).get(path(token)).expect(404)
  })

  it('works once when it is used many times at once', async () => {
    const { app } = await at(BEFORE)
    const token = await linkFor(await makePerson({ password: null }))
    const answers = await Promise.all(
      Array.from({ length: 6 }, () => visitor(app).post(path(token)).send({ password })),
    )
    expect(answers.map(({ status }) => status).sort()).toEqual([200, 404, 404, 404, 404, 404])
  })

  it('works until seven days have passed', async () => {
    const token = await linkFor(await makePerson({ password: null }))
    await visitor((await at('2026-03-11T09:59:59Z')).app)
      .get(path(token))
      .expect(200)
    await visitor((await at('2026-03-11T10:00:01Z')).app)
      .get(path(token))
      .expect(404)
    await visitor((await at('2026-03-11T10:00:01Z')).app)
      .post(path(token))
      .send({ password })
      .expect(404)
  })

  it('ends when a newer one is made', async () => {
    const { app } = await at(BEFORE)
    const person = await makePerson({ password: null })
    const [older, newer] = [await linkFor(person), await linkFor(person)]
    await visitor(app).get(path(older)).expect(404)
    await visitor(app).get(path(newer)).expect(200)
  })

  it('is known to the database by its hash alone', async () => {
    const person = await makePerson({ password: null })
    const token = await linkFor(person)
    const [row] = await rowsOf('SELECT * FROM one_time_links WHERE user_id = :id', {
      id: person.id,
    })
    expect(JSON.stringify(row)).not.toContain(token)
  })

  it('ends the sessions that the person had', async () => {
    const { app } = await at(BEFORE)
    const person = await makePerson()
    const old = await signedIn(app, person)
    await visitor(app)
      .post(path(await linkFor(person)))
      .send({ password })
      .expect(200)
    expect((await old.get(PATHS.session)).body.user).toBeNull()
  })

  it('asks for a password of twelve characters and is not used up by a short one', async () => {
    const { app } = await at(BEFORE)
    const token = await linkFor(await makePerson({ password: null }))
    const { body } = await visitor(app)
      .post(path(token))
      .send({ password: 'too short' })
      .expect(422)
    expect(body.error.fields.password).toMatch(/12 characters/)
    await visitor(app).get(path(token)).expect(200)
  })

  it('that nobody made is not there', async () => {
    const { app } = await at(BEFORE)
    await visitor(app)
      .get(path('x'.repeat(43)))
      .expect(404)
    await visitor(app).get(path('short')).expect(404)
  })
})
