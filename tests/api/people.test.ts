import { describe, expect, it } from 'vitest'
import { Membership } from '../../server/models/index.js'
import { createTestApp, fill, PATHS, signedIn, visitor } from '../support/api.js'
import type { Agent } from '../support/api.js'
import {
  makeMembership,
  makeNetwork,
  makePerson,
  makeStudio,
  networkOf,
  unique,
} from '../support/factories.js'
import type { RoleOver } from '../support/factories.js'
import { rowsOf } from '../support/rows.js'

/** A network with two studios, the owner of the first, and the network's admin. */
async function setting() {
  const { app } = await createTestApp()
  const studio = await makeStudio()
  const network = await networkOf(studio)
  const other = await makeStudio({ network })
  const ownerPerson = await makePerson({ roles: [{ role: 'owner', studio }] })
  const adminPerson = await makePerson({ network, roles: [{ role: 'network-admin' }] })
  const at = (path: string, parts: Record<string, string> = {}) =>
    fill(path, { network: network.slug, ...parts })
  const person = (...roles: RoleOver[]) => makePerson({ network, roles })
  return {
    ...{ app, studio, other, network, at, person, ownerPerson, adminPerson },
    owner: await signedIn(app, ownerPerson),
    admin: await signedIn(app, adminPerson),
  }
}

const newcomer = () => ({ name: 'Kim', email: `${unique('kim')}@example.org` })
const rolesOf = async (userId: number) =>
  (await Membership.findAll({ where: { userId }, acrossNetworks: true, order: ['id'] })).map(
    ({ role, studioId }) => [role, studioId],
  )
const uidsIn = async (agent: Agent, path: string) =>
  ((await agent.get(path).expect(200)).body.rows as { uid: string }[]).map(({ uid }) => uid)

describe('the list of people', () => {
  it('shows an admin everybody with all their roles', async () => {
    const { admin, at, studio, other, person, ownerPerson, adminPerson } = await setting()
    const both = await person({ role: 'technician', studio }, { role: 'owner', studio: other })
    const { body } = await admin.get(at(PATHS.people)).expect(200)
    const byUid = Object.fromEntries(body.rows.map((row: { uid: string }) => [row.uid, row]))
    expect(Object.keys(byUid).sort()).toEqual([ownerPerson.uid, adminPerson.uid, both.uid].sort())
    expect(byUid[both.uid]).toMatchObject({
      email: both.email,
      active: true,
      linkable: true,
      self: false,
      assignments: [
        { role: 'technician', studio: { uid: studio.uid } },
        { role: 'owner', studio: { uid: other.uid } },
      ],
      abilities: { 'people.edit': true },
    })
    expect(byUid[adminPerson.uid]).toMatchObject({ self: true })
  })

  it('shows an owner the people of their studios, with the roles there alone', async () => {
    const { owner, at, studio, other, person, ownerPerson } = await setting()
    const both = await person({ role: 'technician', studio }, { role: 'owner', studio: other })
    await person({ role: 'technician', studio: other })
    const { body } = await owner.get(at(PATHS.people)).expect(200)
    const byUid = Object.fromEntries(body.rows.map((row: { uid: string }) => [row.uid, row]))
    expect(Object.keys(byUid).sort()).toEqual([ownerPerson.uid, both.uid].sort())
    expect(byUid[both.uid].assignments).toMatchObject([
      { role: 'technician', studio: { uid: studio.uid } },
    ])
  })

  it('shows a technician and an education lead nobody', async () => {
    const { app, at, studio, person } = await setting()
    for (const role of [{ role: 'technician', studio }, { role: 'education-lead' }] as const) {
      await (await signedIn(app, await person(role))).get(at(PATHS.people)).expect(403)
    }
  })
})

describe('adding a person', () => {
  it('makes an account and a link with which the person comes in', async () => {
    const { app, owner, at, studio } = await setting()
    const input = { ...newcomer(), assignments: [{ role: 'technician', studio: studio.uid }] }
    const { body } = await owner.post(at(PATHS.people)).send(input).expect(201)
    expect(body.person).toMatchObject({ name: 'Kim', email: input.email, active: false })
    const token = new URL(body.link.url as string).pathname.split('/').at(-1) ?? ''
    const agent = visitor(app)
    await agent
      .post(fill(PATHS.link, { token }))
      .send({ password: 'seven grey saggars' })
      .expect(200)
    const session = (await agent.get(PATHS.session)).body
    expect(session.networks[0].roles).toMatchObject([
      { role: 'technician', studio: { uid: studio.uid } },
    ])
  })

  it('joins an account that exists, under the name that it has, without a link', async () => {
    const { admin, at, network } = await setting()
    const known = await makePerson({ name: 'Robin' })
    const input = {
      name: 'Another name',
      email: known.email.toUpperCase(),
      assignments: [{ role: 'education-lead', studio: null }],
    }
    const { body } = await admin.post(at(PATHS.people)).send(input).expect(201)
    expect(body).toMatchObject({ person: { uid: known.uid, name: 'Robin' }, link: null })
    expect(await rolesOf(known.id)).toContainEqual(['education-lead', null])
    expect(await Membership.count({ where: { networkId: network.id, userId: known.id } })).toBe(1)
  })

  it('gives no link to an account without password that another network added', async () => {
    const { admin, at } = await setting()
    const invited = await makePerson({ password: null })
    const input = {
      ...newcomer(),
      email: invited.email,
      assignments: [{ role: 'education-lead', studio: null }],
    }
    const { body } = await admin.post(at(PATHS.people)).send(input).expect(201)
    expect(body).toMatchObject({ link: null, person: { linkable: false } })
  })

  it('turns somebody away who is here already', async () => {
    const { owner, at, studio, person } = await setting()
    const here = await person({ role: 'technician', studio })
    const input = {
      ...newcomer(),
      email: here.email,
      assignments: [{ role: 'owner', studio: studio.uid }],
    }
    const { body } = await owner.post(at(PATHS.people)).send(input).expect(409)
    expect(body.error).toMatchObject({ code: 'taken', fields: { email: expect.any(String) } })
  })

  it('lets an owner add somebody of another studio to their own', async () => {
    const { owner, at, studio, other, person } = await setting()
    const there = await person({ role: 'technician', studio: other })
    const input = {
      ...newcomer(),
      email: there.email,
      assignments: [{ role: 'technician', studio: studio.uid }],
    }
    const { body } = await owner.post(at(PATHS.people)).send(input).expect(201)
    expect(body).toMatchObject({ link: null, person: { linkable: false } })
    expect(await rolesOf(there.id)).toEqual([
      ['technician', other.id],
      ['technician', studio.id],
    ])
  })

  it('says beside each field what is wrong', async () => {
    const { owner, at } = await setting()
    const bad = { name: '', email: 'kim', assignments: [] }
    const { body } = await owner.post(at(PATHS.people)).send(bad).expect(422)
    expect(Object.keys(body.error.fields).sort()).toEqual(['assignments', 'email', 'name'])
  })

  it('does not know a studio of another network', async () => {
    const { admin, at } = await setting()
    const foreign = await makeStudio()
    const input = { ...newcomer(), assignments: [{ role: 'technician', studio: foreign.uid }] }
    const { body } = await admin.post(at(PATHS.people)).send(input).expect(422)
    expect(body.error.fields).toEqual({ 'assignments.0.studio': 'Choose a studio.' })
    const left = await rowsOf('SELECT id FROM users WHERE email = :email', { email: input.email })
    expect(left).toEqual([])
  })

  it('writes down who did it', async () => {
    const { owner, ownerPerson, at, studio, network } = await setting()
    const input = { ...newcomer(), assignments: [{ role: 'technician', studio: studio.uid }] }
    const { body } = await owner.post(at(PATHS.people)).send(input).expect(201)
    const rows = await rowsOf(
      'SELECT action, actor_id, subject_uid FROM audit_events WHERE network_id = :id ORDER BY id',
      { id: network.id },
    )
    const by = { actor_id: ownerPerson.id, subject_uid: body.person.uid }
    expect(rows).toEqual([
      { action: 'person.added', ...by },
      { action: 'person.link-made', ...by },
    ])
  })

  it('does not add somebody to an archived studio', async () => {
    const { admin, at, studio } = await setting()
    await studio.update({ archivedAt: new Date('2026-01-01T00:00:00Z') })
    const input = { ...newcomer(), assignments: [{ role: 'technician', studio: studio.uid }] }
    const { body } = await admin.post(at(PATHS.people)).send(input).expect(422)
    expect(body.error.fields).toHaveProperty('assignments')
  })
})

describe('roles that an owner may not give', () => {
  it.each([
    ['education lead of their studio', 'education-lead', 'own'],
    ['education lead of the network', 'education-lead', null],
    ['technician of the whole network', 'technician', null],
    ['owner of the whole network', 'owner', null],
    ['network admin', 'network-admin', null],
  ] as const)('%s', async (_, role, where) => {
    const { owner, at, studio } = await setting()
    const assignments = [{ role, studio: where === 'own' ? studio.uid : null }]
    await owner
      .post(at(PATHS.people))
      .send({ ...newcomer(), assignments })
      .expect(403)
  })

  it('any in a studio that they do not own but work in', async () => {
    const { owner, ownerPerson, at, other } = await setting()
    await makeMembership(ownerPerson, { role: 'technician', studio: other })
    const assignments = [{ role: 'technician', studio: other.uid }]
    await owner
      .post(at(PATHS.people))
      .send({ ...newcomer(), assignments })
      .expect(403)
  })

  it('any in a studio that they have no part in, which they do not see', async () => {
    const { owner, at, other } = await setting()
    const assignments = [{ role: 'technician', studio: other.uid }]
    await owner
      .post(at(PATHS.people))
      .send({ ...newcomer(), assignments })
      .expect(422)
  })
})

describe('changing roles', () => {
  it('gives what is new and takes what is missing', async () => {
    const { admin, at, studio, other, person } = await setting()
    const somebody = await person({ role: 'technician', studio })
    const assignments = [
      { role: 'owner', studio: studio.uid },
      { role: 'technician', studio: other.uid },
      { role: 'technician', studio: other.uid },
    ]
    const path = at(PATHS.person, { person: somebody.uid })
    const { body } = await admin.patch(path).send({ assignments }).expect(200)
    expect(body.assignments).toHaveLength(2)
    expect(await rolesOf(somebody.id)).toEqual([
      ['owner', studio.id],
      ['technician', other.id],
    ])
  })

  it('by an owner leaves the roles in other studios as they are', async () => {
    const { owner, at, studio, other, person } = await setting()
    const somebody = await person({ role: 'technician', studio }, { role: 'owner', studio: other })
    const path = at(PATHS.person, { person: somebody.uid })
    await owner
      .patch(path)
      .send({ assignments: [{ role: 'owner', studio: studio.uid }] })
      .expect(200)
    expect(await rolesOf(somebody.id)).toEqual([
      ['owner', other.id],
      ['owner', studio.id],
    ])
  })

  it('by an owner cannot take the role of an education lead', async () => {
    const { owner, at, studio, person } = await setting()
    const somebody = await person(
      { role: 'education-lead', studio },
      { role: 'technician', studio },
    )
    const path = at(PATHS.person, { person: somebody.uid })
    const technician = { role: 'technician', studio: studio.uid }
    const lead = { role: 'education-lead', studio: studio.uid }
    await owner
      .patch(path)
      .send({ assignments: [technician] })
      .expect(403)
    await owner
      .patch(path)
      .send({ assignments: [lead] })
      .expect(200)
    expect(await rolesOf(somebody.id)).toEqual([['education-lead', studio.id]])
  })

  it("does not take the last network admin's role", async () => {
    const { admin, adminPerson, at, studio } = await setting()
    const path = at(PATHS.person, { person: adminPerson.uid })
    const assignments = [{ role: 'owner', studio: studio.uid }]
    const { body } = await admin.patch(path).send({ assignments }).expect(409)
    expect(body.error).toMatchObject({
      code: 'in-use',
      fields: { assignments: expect.any(String) },
    })
    await admin.delete(path).expect(409)
    expect(await rolesOf(adminPerson.id)).toEqual([['network-admin', null]])
  })

  it("keeps one network admin when two take each other's role at once", async () => {
    const { app, network, admin, adminPerson, at, person } = await setting()
    const second = await person({ role: 'network-admin' })
    const secondly = await signedIn(app, second)
    const answers = await Promise.all([
      admin.delete(at(PATHS.person, { person: second.uid })),
      secondly.delete(at(PATHS.person, { person: adminPerson.uid })),
    ])
    expect(answers.filter(({ status }) => status === 200)).toHaveLength(1)
    const left = await Membership.count({ where: { networkId: network.id, role: 'network-admin' } })
    expect(left).toBe(1)
  })

  it('counts from the next request on', async () => {
    const { app, admin, at, studio, person } = await setting()
    const somebody = await person({ role: 'owner', studio })
    const agent = await signedIn(app, somebody)
    await agent.get(at(PATHS.people)).expect(200)
    const path = at(PATHS.person, { person: somebody.uid })
    await admin
      .patch(path)
      .send({ assignments: [{ role: 'technician', studio: studio.uid }] })
      .expect(200)
    await agent.get(at(PATHS.people)).expect(403)
  })
})

describe('removing a person', () => {
  it('takes them out of the network and leaves their account', async () => {
    const { app, admin, at, studio, person } = await setting()
    const somebody = await person({ role: 'technician', studio })
    const agent = await signedIn(app, somebody)
    await admin.delete(at(PATHS.person, { person: somebody.uid })).expect(200)
    await agent.get(at(PATHS.catalogue)).expect(404)
    expect((await agent.get(PATHS.session)).body).toMatchObject({
      user: { uid: somebody.uid },
      networks: [],
    })
  })

  it("by an owner takes their roles in the owner's studios alone", async () => {
    const { owner, at, studio, other, person } = await setting()
    const somebody = await person(
      { role: 'technician', studio },
      { role: 'technician', studio: other },
    )
    await owner.delete(at(PATHS.person, { person: somebody.uid })).expect(200)
    expect(await rolesOf(somebody.id)).toEqual([['technician', other.id]])
    expect(await uidsIn(owner, at(PATHS.people))).not.toContain(somebody.uid)
  })

  it('ends the link that they were given', async () => {
    const { app, owner, at, studio } = await setting()
    const input = { ...newcomer(), assignments: [{ role: 'technician', studio: studio.uid }] }
    const { body } = await owner.post(at(PATHS.people)).send(input).expect(201)
    await owner.delete(at(PATHS.person, { person: body.person.uid })).expect(200)
    const token = (body.link.url as string).split('/').at(-1) ?? ''
    await visitor(app).get(fill(PATHS.link, { token })).expect(404)
  })

  it('is not for somebody of another studio or of nowhere', async () => {
    const { owner, at, other, person } = await setting()
    const somebody = await person({ role: 'technician', studio: other })
    await owner.delete(at(PATHS.person, { person: somebody.uid })).expect(404)
    const stranger = await makePerson({ network: await makeNetwork() })
    await owner.delete(at(PATHS.person, { person: stranger.uid })).expect(404)
  })
})

describe('a new link', () => {
  const linkOf = (agent: Agent, path: string) => agent.post(path).expect(200)

  it('ends the one before', async () => {
    const { app, owner, at, studio } = await setting()
    const input = { ...newcomer(), assignments: [{ role: 'technician', studio: studio.uid }] }
    const { body } = await owner.post(at(PATHS.people)).send(input).expect(201)
    const again = await linkOf(owner, at(PATHS.personLink, { person: body.person.uid }))
    const statusOf = async (url: string) =>
      (await visitor(app).get(fill(PATHS.link, { token: url.split('/').at(-1) ?? '' }))).status
    expect(await statusOf(body.link.url as string)).toBe(404)
    expect(await statusOf(again.body.link.url as string)).toBe(200)
  })

  it("resets the password of somebody whose roles are all the asker's to give", async () => {
    const { owner, at, studio, person } = await setting()
    const somebody = await person({ role: 'technician', studio })
    const { body } = await linkOf(owner, at(PATHS.personLink, { person: somebody.uid }))
    expect(body.link.url).toMatch(/\/reset\//)
  })

  it("is not an owner's to make for somebody with a role that is not theirs to give", async () => {
    const { owner, at, studio, other, person } = await setting()
    const others = [
      await person({ role: 'technician', studio }, { role: 'technician', studio: other }),
      await person({ role: 'owner', studio }, { role: 'network-admin' }),
      await person({ role: 'technician', studio }, { role: 'education-lead', studio }),
    ]
    for (const { uid } of others) {
      await owner.post(at(PATHS.personLink, { person: uid })).expect(403)
    }
  })

  it("is not even an admin's to make for somebody who is in another network too", async () => {
    const { admin, at, studio, person } = await setting()
    const somebody = await person({ role: 'technician', studio })
    await makeMembership(somebody, { role: 'technician', studio: await makeStudio() })
    await admin.post(at(PATHS.personLink, { person: somebody.uid })).expect(403)
  })
})
