import type { Express } from 'express'
import request from 'supertest'
import { afterAll } from 'vitest'
import { createApp } from '../../server/app.js'
import { fill, PATHS } from '../../server/contract/paths.js'
import type { Deps } from '../../server/deps.js'
import { ORIGIN, testDeps } from './deps.js'
import type { TestDeps } from './deps.js'
import { PASSWORD } from './factories.js'

export { fill, ORIGIN, PATHS, testDeps }

/** A client that keeps cookies and sends our Origin with every request. */
export type Agent = ReturnType<typeof request.agent>

export interface TestApp {
  app: Express
  deps: Deps
}

const closers: (() => void)[] = []
afterAll(() => {
  for (const close of closers.splice(0)) close()
})

/**
 * The real application on this worker's database. Real time by default: pass
 * `{ clock: fixedClock('2026-03-04T05:06:07Z') }` for another, `{ config: { demo: true } }` and the
 * like for other settings.
 */
export async function createTestApp(over: TestDeps = {}): Promise<TestApp> {
  const deps = await testDeps(over)
  const { app, close } = createApp(deps)
  closers.push(close)
  return { app, deps }
}

/** A browser that nobody is signed in to. */
export function visitor(app: Express): Agent {
  const agent = request.agent(app)
  void agent.set('Origin', ORIGIN)
  return agent
}

/** A browser in which this person has signed in through the API, with the factories' password. */
export async function signedIn(app: Express, person: { email: string }): Promise<Agent> {
  const agent = visitor(app)
  await agent.post(PATHS.session).send({ email: person.email, password: PASSWORD }).expect(200)
  return agent
}
