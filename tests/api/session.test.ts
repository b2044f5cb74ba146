import request from 'supertest'
import { describe, expect, it } from 'vitest'
import { fixedClock } from '../../server/clock.js'
import { createTestApp, ORIGIN, PATHS, signedIn, visitor } from '../support/api.js'
import {
  makeMembership,
  makeNetwork,
  makePerson,
  makeStudio,
  networkOf,
  PASSWORD,
  unique,
} from '../support/factories.js'
import { rowsOf } from '../support/rows.js'
import { addressOfNobody, cookieOf } from '../support/http.js'

describe('signing in', () => {
  it('answers the person with their networks, roles and studios', async () => {
    const { app } = await createTestApp()
    const studio = await makeStudio()
    const network = await networkOf(studio)
    const person = await makePerson({ roles: [{ role: 'technician', studio }] })

    const { body } = await visitor(app)
      .post(PATHS.session)
      .send({ email: person.email, password: PASSWORD })
      .expect(200)

    expect(body.user).toMatchObject({ uid: person.uid, email: person.email })
    expect(body.networks).toHaveLength(1)
    expect(body.networks[0]).toMatchObject({
      slug: network.slug,
      roles: [{ role: 'technician', studio: { uid: studio.uid } }],
      abilities: { 'firings.pack': true, 'people.read': false },
      studios: [{ uid: studio.uid, abilities: { 'firings.pack': true } }],
    })
  })

  it('lists every network of a person, and only the studios that they may read', async () => {
    const { app } = await createTestApp()
    const studio = await makeStudio()
    await makeStudio({ network: await networkOf(studio) })
    const other = await makeNetwork()
    await makeStudio({ network: other })
    const person = await makePerson({ roles: [{ role: 'technician', studio }] })
    await makeMembership(person, { role: 'network-admin' }, other)

    const { body } = await (await signedIn(app, person)).get(PATHS.session)

    const studios = Object.fromEntries(
      body.networks.map((each: { slug: string; studios: object[] }) => [
        each.slug,
        each.studios.length,
      ]),
    )
    expect(studios).toEqual({ [(await networkOf(studio)).slug]: 1, [other.slug]: 1 })
  })

  it('leaves an archived studio out of what is offered', async () => {
    const { app } = await createTestApp()
    const studio = await makeStudio({ archivedAt: new Date('2026-01-01T00:00:00Z') })
    const person = await makePerson({ roles: [{ role: 'technician', studio }] })
    const { body } = await (await signedIn(app, person)).get(PATHS.session)
    expect(body.networks[0].studios).toEqual([])
  })

  it('keeps the person signed in from request to request', async () => {
    const { app } = await createTestApp()
    const person = await makePerson()
    const agent = await signedIn(app, person)
    const { body } = await agent.get(PATHS.session).expect(200)
    expect(body.user.uid).toBe(person.uid)
  })

  it('takes the e-mail address in any case, with blanks around it', async () => {
    const { app } = await createTestApp()
    const person = await makePerson()
    const email = `  ${person.email.toUpperCase()} `
    await visitor(app).post(PATHS.session).send({ email, password: PASSWORD }).expect(200)
  })

  it('answers a wrong password and an unknown account alike', async () => {
    const { app } = await createTestApp()
    const person = await makePerson()
    const answers = []
    for (const email of [person.email, `${unique('nobody')}@example.org`]) {
      const { body } = await visitor(app)
        .post(PATHS.session)
        .send({ email, password: 'wrong' })
        .expect(401)
      answers.push({ ...body.error, requestId: 'any' })
    }
    expect(answers[0]).toEqual(answers[1])
    expect(answers[0]).toMatchObject({ code: 'sign-in', fields: { password: expect.any(String) } })
  })

  it('refuses an account that has no password yet', async () => {
    const { app } = await createTestApp()
    const person = await makePerson({ password: null })
    await visitor(app)
      .post(PATHS.session)
      .send({ email: person.email, password: PASSWORD })
      .expect(401)
  })

  it('names both fields when both are empty', async () => {
    const { app } = await createTestApp()
    const { body } = await visitor(app)
      .post(PATHS.session)
      .send({ email: '', password: '' })
      .expect(422)
    expect(Object.keys(body.error.fields).sort()).toEqual(['email', 'password'])
  })

  it('gives the session a new id, so that one planted before is worth nothing', async () => {
    const { app } = await createTestApp()
    const [first, second] = [await makePerson(), await makePerson()]
    const agent = visitor(app)
    const signIn = ({ email }: { email: string }) =>
      agent.post(PATHS.session).send({ email, password: PASSWORD }).expect(200)
    const planted = cookieOf(await signIn(first))
    const fresh = cookieOf(await signIn(second))
    expect(fresh).toBeTruthy()
    expect(fresh).not.toBe(planted)
    const { body } = await request(app).get(PATHS.session).set('Cookie', `sid=${planted}`)
    expect(body.user).toBeNull()
  })
})

describe('the cookie of a session', () => {
  it('is HttpOnly and SameSite=Lax, and not Secure over plain HTTP', async () => {
    const { app } = await createTestApp()
    const person = await makePerson()
    const answer = await visitor(app)
      .post(PATHS.session)
      .send({ email: person.email, password: PASSWORD })
    const [cookie = ''] = answer.get('Set-Cookie') ?? []
    expect(cookie).toMatch(/HttpOnly/)
    expect(cookie).toMatch(/SameSite=Lax/)
    expect(cookie).not.toMatch(/Secure/)
  })

  it('is Secure behind a TLS proxy', async () => {
    const origin = 'https://duntless.test'
    const { app } = await createTestApp({ config: { baseUrl: origin } })
    const person = await makePerson()
    const answer = await request(app)
      .post(PATHS.session)
      .set({ Origin: origin, 'X-Forwarded-Proto': 'https' })
      .send({ email: person.email, password: PASSWORD })
      .expect(200)
    expect(answer.get('Set-Cookie')?.[0]).toMatch(/; Secure/)
    expect(answer.get('Strict-Transport-Security')).toBeTruthy()
  })

  it('is refused with a reason when the proxy is not trusted', async () => {
    const origin = 'https://duntless.test'
    const { app } = await createTestApp({ config: { baseUrl: origin, trustProxy: false } })
    const person = await makePerson()
    const { body } = await request(app)
      .post(PATHS.session)
      .set({ Origin: origin, 'X-Forwarded-Proto': 'https' })
      .send({ email: person.email, password: PASSWORD })
      .expect(503)
    expect(body.error.message).toMatch(/TRUST_PROXY/)
  })

  it('is not set for a visitor who does not sign in', async () => {
    const { app } = await createTestApp()
    const answer = await visitor(app).get(PATHS.session).expect(200)
    expect(answer.get('Set-Cookie')).toBeUndefined()
  })
})

describe('signing out', () => {
  it('ends this session and leaves the others', async () => {
    const { app } = await createTestApp()
    const person = await makePerson()
    const [here, there] = [await signedIn(app, person), await signedIn(app, person)]
    const { body } = await here.delete(PATHS.session).expect(200)
    expect(body.user).toBeNull()
    expect((await here.get(PATHS.session)).body.user).toBeNull()
    expect((await there.get(PATHS.session)).body.user.uid).toBe(person.uid)
  })

  it('is no error when nobody is signed in', async () => {
    const { app } = await createTestApp()
    await visitor(app).delete(PATHS.session).expect(200)
  })

  it('everywhere ends every session of the person, and of nobody else', async () => {
    const { app } = await createTestApp()
    const [person, other] = [await makePerson(), await makePerson()]
    const [here, there] = [await signedIn(app, person), await signedIn(app, person)]
    const others = await signedIn(app, other)
    await here.delete(PATHS.sessions).expect(200)
    expect((await here.get(PATHS.session)).body.user).toBeNull()
    expect((await there.get(PATHS.session)).body.user).toBeNull()
    expect((await others.get(PATHS.session)).body.user.uid).toBe(other.uid)
    const left = await rowsOf('SELECT sid FROM sessions WHERE user_id = :id', { id: person.id })
    expect(left).toEqual([])
  })

  it("everywhere makes a session nobody's even when its row is written back", async () => {
    const { app, deps } = await createTestApp()
    const person = await makePerson()
    const [here, there] = [await signedIn(app, person), await signedIn(app, person)]
    const kept = await rowsOf('SELECT * FROM sessions WHERE user_id = :id', { id: person.id })
    await here.delete(PATHS.sessions).expect(200)
    await deps.sequelize.getQueryInterface().bulkInsert('sessions', kept)
    expect((await there.get(PATHS.session)).body.user).toBeNull()
  })
})

describe('guessing passwords', () => {
  const at = '2026-03-04T10:00:00Z'
  const wrong = { password: 'wrong guess' }

  it('stops an account after ten wrong guesses, with the seconds to wait', async () => {
    const { app } = await createTestApp({ clock: fixedClock(at) })
    const person = await makePerson()
    const guess = (password: string) =>
      visitor(app)
        .post(PATHS.session)
        .set('X-Forwarded-For', addressOfNobody())
        .send({ email: person.email, password })
    for (let n = 0; n < 10; n += 1) await guess(wrong.password).expect(401)
    const { body } = await guess(PASSWORD).expect(429)
    expect(body.error).toMatchObject({ code: 'too-many', details: { seconds: 900 } })
  })

  it('lets the account try again when the time has passed', async () => {
    const person = await makePerson()
    const { app } = await createTestApp({ clock: fixedClock(at) })
    for (let n = 0; n < 11; n += 1) {
      await visitor(app)
        .post(PATHS.session)
        .set('X-Forwarded-For', addressOfNobody())
        .send({ email: person.email, ...wrong })
    }
    const later = await createTestApp({ clock: fixedClock('2026-03-04T10:15:01Z') })
    await signedIn(later.app, person)
  })

  it('forgets the wrong guesses of an account that signs in', async () => {
    const { app } = await createTestApp({ clock: fixedClock(at) })
    const person = await makePerson()
    for (let round = 0; round < 2; round += 1) {
      for (let n = 0; n < 9; n += 1) {
        await visitor(app)
          .post(PATHS.session)
          .set('X-Forwarded-For', addressOfNobody())
          .send({ email: person.email, ...wrong })
          .expect(401)
      }
      await signedIn(app, person)
    }
  })

  it('stops an unknown account like a known one', async () => {
    const { app } = await createTestApp({ clock: fixedClock(at) })
    const email = `${unique('nobody')}@example.org`
    const guess = () =>
      visitor(app)
        .post(PATHS.session)
        .set('X-Forwarded-For', addressOfNobody())
        .send({ email, ...wrong })
    for (let n = 0; n < 10; n += 1) await guess().expect(401)
    await guess().expect(429)
  })

  it('stops an address after fifty wrong guesses, whatever the accounts', async () => {
    const { app } = await createTestApp({ clock: fixedClock(at) })
    const address = addressOfNobody()
    const guess = (from: string) =>
      visitor(app)
        .post(PATHS.session)
        .set('X-Forwarded-For', from)
        .send({ email: `${unique('nobody')}@example.org`, ...wrong })
    for (let n = 0; n < 50; n += 1) await guess(address).expect(401)
    await guess(address).expect(429)
    await guess(addressOfNobody()).expect(401)
  })

  it('lets no more than ten of many guesses at once be judged', async () => {
    const { app } = await createTestApp({ clock: fixedClock(at) })
    const person = await makePerson()
    const answers = await Promise.all(
      Array.from({ length: 25 }, () =>
        visitor(app)
          .post(PATHS.session)
          .set('X-Forwarded-For', addressOfNobody())
          .send({ email: person.email, ...wrong }),
      ),
    )
    const judged = answers.filter(({ status }) => status === 401).length
    expect(judged).toBeLessThanOrEqual(10)
    expect(answers.filter(({ status }) => status === 429)).toHaveLength(25 - judged)
  })
})

describe('requests from elsewhere', () => {
  const cases: [string, Record<string, string>][] = [
    ['of another origin', { Origin: 'http://elsewhere.test' }],
    ['of a null origin', { Origin: 'null' }],
    ['that the browser calls cross-site', { Origin: ORIGIN, 'Sec-Fetch-Site': 'cross-site' }],
    ['that the browser calls same-site', { 'Sec-Fetch-Site': 'same-site' }],
    ['that do not say where they come from', {}],
  ]
  it.each(cases)('%s are turned away', async (_, headers) => {
    const { app } = await createTestApp()
    const person = await makePerson()
    const { body } = await request(app)
      .post(PATHS.session)
      .set(headers)
      .send({ email: person.email, password: PASSWORD })
      .expect(403)
    expect(body.error.code).toBe('cross-site')
  })

  it('may read, since reading changes nothing', async () => {
    const { app } = await createTestApp()
    await request(app).get(PATHS.session).set('Origin', 'http://elsewhere.test').expect(200)
  })
})

describe('every answer', () => {
  it('carries the content-security policy as decided', async () => {
    const { app } = await createTestApp()
    const policy = (await request(app).get(PATHS.session)).get('Content-Security-Policy') ?? ''
    const rules = Object.fromEntries(
      policy
        .split(';')
        .map((rule) => [rule.trim().split(' ')[0], rule.trim().split(' ').slice(1).join(' ')]),
    )
    expect(rules).toEqual({
      'default-src': "'self'",
      'script-src': "'self'",
      'connect-src': "'self'",
      'worker-src': "'self'",
      'style-src': "'self' 'unsafe-inline'",
      'font-src': "'self'",
      'img-src': "'self' data: blob:",
      'object-src': "'none'",
      'base-uri': "'none'",
      'frame-ancestors': "'none'",
      'form-action': "'self'",
    })
  })

  it('of the API is kept by no cache, and does not say what serves it', async () => {
    const { app } = await createTestApp()
    const answer = await request(app).get(PATHS.session)
    expect(answer.get('Cache-Control')).toBe('no-store')
    expect(answer.get('X-Powered-By')).toBeUndefined()
    expect(answer.get('X-Content-Type-Options')).toBe('nosniff')
  })

  it('of a request that is not JSON says so', async () => {
    const { app } = await createTestApp()
    const { body } = await visitor(app)
      .post(PATHS.session)
      .set('Content-Type', 'application/json')
      .send('{"email": ')
      .expect(422)
    expect(body.error.code).toBe('invalid')
  })
})

describe('demo accounts', () => {
  it('are listed in demo mode alone', async () => {
    const network = await makeNetwork({ demo: true })
    const label = unique('Technician of the demo')
    const person = await makePerson({ network, demoLabel: label })
    const labels = async (demo: boolean) => {
      const { app } = await createTestApp({ config: { demo } })
      const { body } = await visitor(app).get(PATHS.session)
      return (body.demo as { label: string; email: string }[]).filter(
        (each) => each.label === label,
      )
    }
    expect(await labels(true)).toMatchObject([{ email: person.email, network: network.name }])
    expect(await labels(false)).toEqual([])
  })

  it('are not those of networks that are no demo', async () => {
    const label = unique('not a demo')
    await makePerson({ demoLabel: label })
    const { app } = await createTestApp({ config: { demo: true } })
    const { body } = await visitor(app).get(PATHS.session)
    expect(body.demo.map((each: { label: string }) => each.label)).not.toContain(label)
  })
})
