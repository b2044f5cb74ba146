import { describe, expect, it } from 'vitest'
import { createTestApp, PATHS, signedIn, visitor } from '../support/api.js'
import { makePerson, PASSWORD } from '../support/factories.js'
import { addressOfNobody } from '../support/http.js'

const password = 'seven grey saggars'

describe('the account', () => {
  it('keeps a new name and preferences', async () => {
    const { app } = await createTestApp()
    const agent = await signedIn(app, await makePerson())
    const input = {
      name: 'Ada',
      preferences: { theme: 'dark', temperatureUnit: 'F', lengthUnit: null },
    }
    const { body } = await agent.patch(PATHS.account).send(input).expect(200)
    expect(body.user).toMatchObject(input)
    expect((await agent.get(PATHS.session)).body.user).toMatchObject(input)
  })

  it('needs a name', async () => {
    const { app } = await createTestApp()
    const agent = await signedIn(app, await makePerson())
    const { body } = await agent
      .patch(PATHS.account)
      .send({ name: '  ', preferences: {} })
      .expect(422)
    expect(body.error.fields).toEqual({ name: 'Enter your name.' })
  })

  it('does not take another e-mail address', async () => {
    const { app } = await createTestApp()
    const person = await makePerson()
    const agent = await signedIn(app, person)
    const { body } = await agent
      .patch(PATHS.account)
      .send({ name: 'Ada', preferences: {}, email: 'x@example.org' })
    expect(body.user.email).toBe(person.email)
  })

  it('changes the password, keeps this session and ends the others', async () => {
    const { app } = await createTestApp()
    const person = await makePerson()
    const [here, there] = [await signedIn(app, person), await signedIn(app, person)]
    await here.put(PATHS.accountPassword).send({ current: PASSWORD, password }).expect(200)
    expect((await here.get(PATHS.session)).body.user.uid).toBe(person.uid)
    expect((await there.get(PATHS.session)).body.user).toBeNull()
    await visitor(app)
      .post(PATHS.session)
      .send({ email: person.email, password: PASSWORD })
      .expect(401)
    await visitor(app).post(PATHS.session).send({ email: person.email, password }).expect(200)
  })

  it('does not change the password without the present one', async () => {
    const { app } = await createTestApp()
    const person = await makePerson()
    const agent = await signedIn(app, person)
    const { body } = await agent
      .put(PATHS.accountPassword)
      .send({ current: 'wrong', password })
      .expect(422)
    expect(body.error.fields).toHaveProperty('current')
    await signedIn(app, person)
  })

  it('counts guesses at the present password like guesses at the door', async () => {
    const { app } = await createTestApp()
    const person = await makePerson()
    const agent = await signedIn(app, person)
    const guess = () =>
      agent
        .put(PATHS.accountPassword)
        .set('X-Forwarded-For', addressOfNobody())
        .send({ current: 'wrong', password })
    for (let n = 0; n < 10; n += 1) await guess().expect(422)
    await guess().expect(429)
  })
})
