import { describe, expect, it } from 'vitest'
import { linkForAccount, setUp } from '../../server/commands/setUp.js'
import { Network } from '../../server/models/index.js'
import { slugProblem } from '../../server/shared/slugs.js'
import { createTestApp, fill, ORIGIN, PATHS, testDeps, visitor } from '../support/api.js'
import { makePerson, unique } from '../support/factories.js'

const input = () => ({
  network: 'Clay Ring',
  slug: unique('ring'),
  studio: 'Mill Lane',
  timeZone: 'America/Denver',
  name: 'Ana',
  email: `${unique('ana')}@example.org`,
  currency: 'USD',
})
const tokenOf = (url = '') => url.split('/').at(-1) ?? ''

describe('setting up', () => {
  it('makes a network, its first studio and an admin who owns it, with a link to come in', async () => {
    const { app, deps } = await createTestApp()
    const wanted = input()
    const link = await setUp(wanted, deps)
    expect(link?.url).toMatch(new RegExp(`^${ORIGIN}/invite/`))
    const answer = await visitor(app)
      .post(fill(PATHS.link, { token: tokenOf(link?.url) }))
      .send({ password: 'seven grey saggars' })
      .expect(200)
    expect(answer.body.networks).toMatchObject([
      {
        slug: wanted.slug,
        name: 'Clay Ring',
        roles: [
          { role: 'network-admin', studio: null },
          { role: 'owner', studio: { name: 'Mill Lane' } },
        ],
        studios: [{ slug: 'mill-lane', timeZone: 'America/Denver', currency: 'USD' }],
        abilities: { 'studios.create': true, 'firings.pack': true },
      },
    ])
  })

  it('refuses a slug that is in use and makes nothing', async () => {
    const deps = await testDeps()
    const first = input()
    await setUp(first, deps)
    const second = { ...input(), slug: first.slug }
    await expect(setUp(second, deps)).rejects.toMatchObject({
      code: 'taken',
      extra: { fields: { slug: expect.any(String) } },
    })
    expect(await Network.count({ where: { slug: first.slug } })).toBe(1)
  })

  it('gives no link to somebody who has a password', async () => {
    const { email } = await makePerson()
    expect(await setUp({ ...input(), email }, await testDeps())).toBeNull()
  })

  it('makes a link for somebody who has forgotten the password', async () => {
    const deps = await testDeps()
    const { email } = await makePerson()
    expect((await linkForAccount(` ${email.toUpperCase()}`, deps)).url).toMatch(/\/reset\//)
    await expect(linkForAccount('nobody@example.org', deps)).rejects.toMatchObject({
      code: 'not-found',
    })
  })
})

describe('the short name of a network', () => {
  it.each(['clay-ring', 'a', 'ring2', 'x'.repeat(60)])('may be %s', (slug) => {
    expect(slugProblem(slug)).toBeNull()
  })
  it.each(['', 'Clay', 'clay ring', '-ring', 'ring-', 'café', 'x'.repeat(61), 'api', 'sign-in'])(
    'may not be "%s"',
    (slug) => {
      expect(slugProblem(slug)).toEqual(expect.any(String))
    },
  )
})
