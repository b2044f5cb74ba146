import { describe, expect, it } from 'vitest'
import { createTestApp, PATHS, signedIn, visitor } from '../support/api.js'
import { makePerson, makeStudio, networkOf, PASSWORD } from '../support/factories.js'

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

  it('keeps the person signed in from request to request', async () => {
    const { app } = await createTestApp()
    const person = await makePerson()
    const agent = await signedIn(app, person)
    const { body } = await agent.get(PATHS.session).expect(200)
    expect(body.user.uid).toBe(person.uid)
  })
})
