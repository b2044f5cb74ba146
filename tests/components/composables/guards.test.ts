import { beforeEach, describe, expect, it } from 'vitest'
import { createMemoryHistory, createRouter } from 'vue-router'
import type { Session } from '../../../server/contract/session.js'
import { routes } from '../../../src/router'
import { installGuards } from '../../../src/router/guards'
import { useSessionStore } from '../../../src/stores/session'

const network = {
  slug: 'kettle',
  name: 'Kettle Ring',
  timeZone: 'UTC',
  temperatureUnit: 'C',
  lengthUnit: 'mm',
  weekStart: 1,
  roles: [],
  abilities: { 'today.read': true },
  studios: [],
} as const
const preferences = { theme: 'system', temperatureUnit: null, lengthUnit: null } as const
const nobody: Session = { user: null, networks: [], demo: [], version: '1' }
const somebody = {
  ...nobody,
  user: { uid: 'u', name: 'Ines', email: 'i@example.org', preferences },
  networks: [network],
} as unknown as Session

/** The app's own addresses with empty pages. */
const start = (session: Session) => {
  const empty = routes.map((route) => ({ ...route, component: { render: () => null } }))
  const router = createRouter({ history: createMemoryHistory(), routes: empty as typeof routes })
  installGuards(router)
  useSessionStore().set(session)
  return router
}

describe('somebody who is not signed in', () => {
  it('signs in first and is to come back', async () => {
    const router = start(nobody)
    await router.push('/kettle/losses?kind=bisque')
    expect(router.currentRoute.value).toMatchObject({
      name: 'sign-in',
      query: { next: '/kettle/losses?kind=bisque' },
    })
  })

  it('may open a one-time link', async () => {
    const router = start(nobody)
    await router.push('/invite/abc')
    expect(router.currentRoute.value).toMatchObject({
      name: 'set-password',
      params: { token: 'abc' },
    })
  })

  it('sees no way back after the front door', async () => {
    const router = start(nobody)
    await router.push('/')
    expect(router.currentRoute.value).toMatchObject({ name: 'sign-in', query: {} })
  })
})

describe('somebody who is signed in', () => {
  let router: ReturnType<typeof start>
  beforeEach(() => {
    router = start(somebody)
  })

  it('begins at today of their network', async () => {
    await router.push('/')
    expect(router.currentRoute.value.fullPath).toBe('/kettle/today')
  })

  it('goes on to where they were going', async () => {
    await router.push({ name: 'sign-in', query: { next: '/kettle/losses?kind=bisque' } })
    expect(router.currentRoute.value.fullPath).toBe('/kettle/losses?kind=bisque')
  })

  it.each(['//evil.example/x', 'https://evil.example/', '/sign-in?next=/sign-in'])(
    'is not sent to %s',
    async (next) => {
      await router.push({ name: 'sign-in', query: { next } })
      expect(router.currentRoute.value.fullPath).toBe('/kettle/today')
    },
  )

  it('finds nothing in a network that is not theirs, at the same address', async () => {
    await router.push('/stranger/losses')
    expect(router.currentRoute.value).toMatchObject({ name: 'not-found', path: '/stranger/losses' })
  })

  it('finds no settings of an unknown kind', async () => {
    await router.push('/kettle/settings/wheels')
    expect(router.currentRoute.value.name).toBe('not-found')
  })

  it('goes to their account when they are in no network', async () => {
    useSessionStore().set({ ...somebody, networks: [] })
    await router.push('/')
    expect(router.currentRoute.value.name).toBe('account')
  })
})
