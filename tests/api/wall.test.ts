import type { Express } from 'express'
import { beforeAll, describe, expect, it } from 'vitest'
import type { Role } from '../../server/contract/roles.js'
import { can } from '../../server/policies/index.js'
import type { Scope } from '../../server/policies/index.js'
import type { Route } from '../../server/routes/defineRoute.js'
import { ROUTES } from '../../server/routes/index.js'
import { sessionRoutes } from '../../server/routes/session.js'
import { createTestApp, signedIn, visitor } from '../support/api.js'
import type { Agent } from '../support/api.js'
import { makePerson, unique } from '../support/factories.js'
import { aim, entitled, makeWorld, namesThing, secretsOf, stateOf } from '../support/wall.js'
import type { World } from '../support/wall.js'

/**
 * Every route of the application is walked as every kind of stranger. What a route takes is made from
 * its own schemas, what its path names from the world: a new route is walked without a word here.
 */
const named = (routes: readonly Route[]) =>
  routes.map((route) => [`${route.method.toUpperCase()} ${route.path}`, route] as const)

const NOBODY = () => Promise.reject(new Error('not called'))
const ALL = [...sessionRoutes(NOBODY), ...ROUTES]
const OF_NETWORK = ROUTES.filter((route) => route.tenant)
const WRITES = OF_NETWORK.filter((route) => route.method !== 'get')
const READS = OF_NETWORK.filter((route) => route.method === 'get')

let app: Express
let world: World
beforeAll(async () => {
  app = (await createTestApp()).app
  world = await makeWorld()
})

/** The answer's error without what differs from request to request. */
const errorOf = ({ body }: { body: { error?: object } }) => ({ ...body.error, requestId: '' })

/** Runs `attempt` and proves that it left every row of the database as it was. */
async function changingNothing<T>(attempt: () => PromiseLike<T>): Promise<T> {
  const before = await stateOf()
  const answer = await attempt()
  expect(await stateOf()).toEqual(before)
  return answer
}

describe('the walk', () => {
  it('finds the routes, and none of a network that is public', () => {
    expect(OF_NETWORK.length).toBeGreaterThan(20)
    expect(
      OF_NETWORK.filter(({ ability }) => ability === 'public' || ability === 'signed-in'),
    ).toEqual([])
  })

  it('takes each method and path once', () => {
    const names = named(ALL).map(([name]) => name)
    expect(names).toEqual([...new Set(names)])
  })
})

describe('who may', () => {
  it.each(named(OF_NETWORK))('gets through to %s', async (_, route) => {
    const own = await makeWorld()
    const agent = await entitled(app, own)
    const answer = await aim(agent, route, { slug: own.network.slug, path: own, named: own })
    // 409 is an answer too: a firing that is reported cannot be packed again.
    expect([200, 201, 202, 409], JSON.stringify(answer.body)).toContain(answer.status)
  })
})

describe('signed out', () => {
  it.each(named(ALL.filter(({ ability }) => ability !== 'public')))(
    'is asked to sign in by %s',
    async (_, route) => {
      const answer = await changingNothing(() =>
        aim(visitor(app), route, { slug: world.network.slug, path: world, named: world }),
      )
      expect(answer.status).toBe(401)
      expect(answer.body.error.code).toBe('sign-in')
    },
  )
})

describe('a member of another network, with every role there,', () => {
  let stranger: Agent
  let home: World
  beforeAll(async () => {
    home = await makeWorld()
    stranger = await entitled(app, home)
  })

  it.each(named(OF_NETWORK))('finds no network at %s', async (_, route) => {
    const answer = await changingNothing(() =>
      aim(stranger, route, { slug: world.network.slug, path: world, named: world }),
    )
    const missing = await aim(stranger, route, {
      slug: unique('no-such'),
      path: world,
      named: world,
    })
    expect([answer.status, missing.status]).toEqual([404, 404])
    expect(errorOf(answer)).toEqual(errorOf(missing))
  })

  it.each(named(OF_NETWORK.filter(namesThing)))(
    'does not reach a thing of ours through their own network at %s',
    async (_, route) => {
      const before = await stateOf(world.network.id)
      const at = { slug: home.network.slug, named: world }
      const answer = await aim(stranger, route, { ...at, path: world })
      const missing = await aim(stranger, route, at)
      // What a PUT would make it makes in their network: there the body is at fault.
      expect(route.method === 'put' ? [404, 422] : [404]).toContain(answer.status)
      expect(errorOf(answer)).toEqual(errorOf(missing))
      expect(await stateOf(world.network.id)).toEqual(before)
    },
  )

  it.each(named(WRITES))(
    'cannot point a thing of their own at one of ours with %s',
    async (_, route) => {
      const before = await stateOf(world.network.id)
      const answer = await aim(stranger, route, { slug: home.network.slug, named: world })
      if (answer.ok) expect(JSON.stringify(answer.body)).not.toContain(world.studio.uid)
      expect(await stateOf(world.network.id)).toEqual(before)
    },
  )

  it.each(named(READS))('is told nothing of ours by %s', async (_, route) => {
    const secrets = await secretsOf(world)
    const answer = await aim(stranger, route, { slug: home.network.slug, path: home, named: home })
    expect(answer.status).toBe(200)
    for (const secret of secrets) expect(answer.text).not.toContain(secret)
  })
})

describe('who works in another studio of the network', () => {
  let neighbour: Agent
  let home: World
  beforeAll(async () => {
    home = await makeWorld(world.network)
    const roles = [
      { role: 'owner', studio: home.studio },
      { role: 'technician', studio: home.studio },
    ] as const
    neighbour = await signedIn(app, await makePerson({ roles: [...roles] }))
  })

  it.each(named(WRITES))('is refused by %s', async (_, route) => {
    const answer = await changingNothing(() =>
      aim(neighbour, route, { slug: world.network.slug, path: world, named: world }),
    )
    // 422 where a form names a studio that is not theirs to see; "who may" proves that the form is sound.
    expect([403, 404, 422], JSON.stringify(answer.body)).toContain(answer.status)
  })

  it.each(named(WRITES))(
    'is refused by %s for something new that points at what is not theirs',
    async (_, route) => {
      const answer = await changingNothing(() =>
        aim(neighbour, route, { slug: world.network.slug, named: world }),
      )
      expect([403, 404, 422], JSON.stringify(answer.body)).toContain(answer.status)
    },
  )

  it.each(named(READS))('is told nothing of the studio by %s', async (_, route) => {
    const secrets = await secretsOf(world)
    const at = { slug: world.network.slug, path: world, named: world }
    const answer = await changingNothing(() => aim(neighbour, route, at))
    if (namesThing(route)) expect(answer.status).toBe(404)
    for (const secret of secrets) expect(answer.text).not.toContain(secret)
  })
})

describe('too low a role', () => {
  const STUDIO = 1
  const refusedBy = (role: Role) =>
    OF_NETWORK.filter(({ ability }) => {
      if (ability === 'public' || ability === 'signed-in') return false
      const roles = [{ role, studioId: role === 'network-admin' ? null : STUDIO }]
      const scope = { roles, studioIds: [STUDIO] } as unknown as Scope
      return !can(scope, ability, { studioId: STUDIO })
    })
  const signedInAs = async (role: Role) => {
    const studio = role === 'network-admin' ? undefined : world.studio
    return signedIn(app, await makePerson({ network: world.network, roles: [{ role, studio }] }))
  }

  describe.each(['technician', 'owner', 'education-lead', 'network-admin'] as const)(
    'that of %s',
    (role) => {
      let agent: Agent
      beforeAll(async () => {
        agent = await signedInAs(role)
      })

      it.each(named(refusedBy(role)))('is refused by %s', async (_, route) => {
        const answer = await changingNothing(() =>
          aim(agent, route, { slug: world.network.slug, path: world, named: world }),
        )
        expect(answer.status).toBe(403)
        expect(answer.body.error.code).toBe('forbidden')
      })
    },
  )

  it('is told before its input is judged', async () => {
    const route = refusedBy('technician').find(({ input }) => input.body)
    if (!route) throw new Error('No route to try')
    const agent = await signedInAs('technician')
    const at = { slug: world.network.slug, path: world, named: world }
    await aim(agent, route, at).send({ nonsense: true }).expect(403)
  })
})

describe('a request from another site', () => {
  const open = ALL.filter(({ csrf, method }) => method !== 'get' && csrf === 'same-origin')
  it.each(named(open))('is turned away by %s, whoever is signed in', async (_, route) => {
    const agent = await entitled(app, world)
    const answer = await changingNothing(() =>
      aim(agent, route, { slug: world.network.slug, path: world, named: world }).set(
        'Origin',
        'http://elsewhere.test',
      ),
    )
    expect(answer.status).toBe(403)
    expect(answer.body.error.code).toBe('cross-site')
  })
})
