/** Set-up of component tests, and how they mount: in the document, with what the app installs. */
import { enableAutoUnmount, mount } from '@vue/test-utils'
import type { VueWrapper } from '@vue/test-utils'
import { VueQueryPlugin } from '@tanstack/vue-query'
import { createPinia, setActivePinia } from 'pinia'
import { Quasar } from 'quasar'
import { afterEach, beforeEach } from 'vitest'
import { createMemoryHistory, createRouter } from 'vue-router'
import type { Router } from 'vue-router'
import { makeQueryClient } from '../../src/api/queryClient'
import { quasarOptions } from '../../src/quasar'

// Quasar reads it while it installs; happy-dom lacks it.
if (!('orientation' in window.screen)) {
  const orientation = Object.assign(new EventTarget(), { type: 'landscape-primary', angle: 0 })
  Object.defineProperty(window.screen, 'orientation', { value: orientation })
}

enableAutoUnmount(afterEach)
beforeEach(() => setActivePinia(createPinia()))
afterEach(() => {
  document.body.innerHTML = ''
  localStorage.clear()
})

export interface Mounted {
  wrapper: VueWrapper
  router: Router
}

interface MountOptions {
  props?: Record<string, unknown>
  slots?: Record<string, unknown>
  /** Where the test begins. */
  at?: string
}

const Nothing = { render: () => null }

/**
 * Mounts a component as the app would: Quasar, Pinia, the query cache, and a router in memory that
 * knows every name and takes any address. Dialogs and menus are in `document.body`.
 * `component` is unknown because a generic component is a mere function to TypeScript.
 */
export async function mountUi(component: unknown, options: MountOptions = {}): Promise<Mounted> {
  const router = memoryRouter()
  await router.push(options.at ?? '/kettle/today')
  const wrapper = mount(component, {
    props: options.props ?? {},
    slots: (options.slots ?? {}) as never,
    attachTo: document.body,
    global: {
      plugins: [
        router,
        createPinia(),
        [Quasar, quasarOptions],
        [VueQueryPlugin, { queryClient: makeQueryClient() }],
      ],
    },
  })
  return { wrapper, router }
}

/** The addresses of the app without its pages. */
export function memoryRouter(): Router {
  const page = (name: string, path: string) => ({
    name,
    path,
    component: Nothing,
    meta: { layout: 'app' as const, title: name },
  })
  return createRouter({
    history: createMemoryHistory(),
    routes: [
      page('home', '/'),
      page('sign-in', '/sign-in'),
      page('account', '/account'),
      page('today', '/:network/today'),
      page('firings', '/:network/firings'),
      page('firing-new', '/:network/firings/new'),
      page('firing', '/:network/firings/:id'),
      page('firing-report', '/:network/firings/:id/report'),
      page('losses', '/:network/losses'),
      page('findings', '/:network/findings'),
      page('finding', '/:network/findings/:id'),
      page('settings', '/:network/settings/:section'),
      page('not-found', '/:anything(.*)*'),
    ],
  })
}

/** The element with this role (explicit, or that of its tag) and accessible name, anywhere in the document. */
export function byName(selector: string, name: string | RegExp): HTMLElement {
  const found = [...document.body.querySelectorAll<HTMLElement>(selector)].find((element) => {
    const text = (element.getAttribute('aria-label') ?? element.textContent ?? '')
      .replace(/\s+/g, ' ')
      .trim()
    return typeof name === 'string' ? text === name : name.test(text)
  })
  if (!found)
    throw new Error(`No ${selector} named ${String(name)} in: ${document.body.textContent}`)
  return found
}
