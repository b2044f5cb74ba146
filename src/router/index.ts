import { createRouter, createWebHistory } from 'vue-router'
import type { RouteLocationNormalized, Router, RouterHistory, RouteRecordRaw } from 'vue-router'
import type { Ability } from '../../server/contract/roles.js'
import { installGuards } from './guards'

declare module 'vue-router' {
  interface RouteMeta {
    /** `app` desk and phone, `kiln` full screen, `signed-out` a sheet without a network. */
    layout: 'app' | 'kiln' | 'signed-out'
    /** Of the window, until the page knows better. */
    title: string
    /** Needed somewhere in the network; without it the layout shows the no-permission state. */
    ability?: Ability
    /** Open to everybody. */
    public?: true
  }
}

export const SETTINGS_SECTIONS = [
  'studios',
  'kilns',
  'clay-bodies',
  'glazes',
  'practices',
  'racks',
  'classes',
  'programmes',
  'forms',
  'people',
  'jobs',
] as const
export type SettingsSection = (typeof SETTINGS_SECTIONS)[number]

export type RouteName =
  | 'home'
  | 'sign-in'
  | 'set-password'
  | 'account'
  | 'today'
  | 'firings'
  | 'firing-new'
  | 'firing'
  | 'firing-report'
  | 'losses'
  | 'findings'
  | 'finding'
  | 'settings'
  | 'not-found'

const named = (name: RouteName): { name: RouteName } => ({ name })

export const routes: RouteRecordRaw[] = [
  // Guards send on from here: to today of the person's network.
  {
    path: '/',
    ...named('home'),
    component: () => import('../pages/NotFoundPage.vue'),
    meta: { layout: 'signed-out', title: 'Duntless' },
  },
  {
    path: '/sign-in',
    ...named('sign-in'),
    component: () => import('../pages/SignInPage.vue'),
    meta: { layout: 'signed-out', title: 'Sign in', public: true },
  },
  {
    path: '/:purpose(invite|reset)/:token',
    ...named('set-password'),
    component: () => import('../pages/SetPasswordPage.vue'),
    props: true,
    meta: { layout: 'signed-out', title: 'Set your password', public: true },
  },
  {
    path: '/account',
    ...named('account'),
    component: () => import('../pages/AccountPage.vue'),
    meta: { layout: 'app', title: 'Account' },
  },
  {
    path: '/:network/today',
    ...named('today'),
    component: () => import('../pages/TodayPage.vue'),
    meta: { layout: 'app', title: 'Today', ability: 'today.read' },
  },
  {
    path: '/:network/firings',
    ...named('firings'),
    component: () => import('../pages/FiringsPage.vue'),
    meta: { layout: 'app', title: 'Firings', ability: 'firings.read' },
  },
  {
    path: '/:network/firings/new',
    ...named('firing-new'),
    component: () => import('../pages/FiringNewPage.vue'),
    meta: { layout: 'app', title: 'Pack a firing', ability: 'firings.pack' },
  },
  {
    path: '/:network/firings/:id',
    ...named('firing'),
    component: () => import('../pages/FiringPage.vue'),
    meta: { layout: 'app', title: 'Firing', ability: 'firings.read' },
  },
  {
    path: '/:network/firings/:id/report',
    ...named('firing-report'),
    component: () => import('../pages/FiringReportPage.vue'),
    meta: { layout: 'kiln', title: 'Report', ability: 'firings.report' },
  },
  {
    path: '/:network/losses',
    ...named('losses'),
    component: () => import('../pages/LossesPage.vue'),
    meta: { layout: 'app', title: 'Losses', ability: 'losses.read' },
  },
  {
    path: '/:network/findings',
    ...named('findings'),
    component: () => import('../pages/FindingsPage.vue'),
    meta: { layout: 'app', title: 'Findings', ability: 'findings.read' },
  },
  {
    path: '/:network/findings/:id',
    ...named('finding'),
    component: () => import('../pages/FindingPage.vue'),
    meta: { layout: 'app', title: 'Finding', ability: 'findings.read' },
  },
  {
    path: `/:network/settings/:section(${SETTINGS_SECTIONS.join('|')})`,
    ...named('settings'),
    component: () => import('../pages/SettingsPage.vue'),
    meta: { layout: 'app', title: 'Settings', ability: 'catalogue.read' },
  },
  {
    path: '/:anything(.*)*',
    ...named('not-found'),
    component: () => import('../pages/NotFoundPage.vue'),
    meta: { layout: 'app', title: 'Not found', public: true },
  },
]

/** The router of the product; tests give a history in memory. */
export function makeRouter(history: RouterHistory = createWebHistory()): Router {
  const router = createRouter({ history, routes, scrollBehavior })
  installGuards(router)
  return router
}

function scrollBehavior(
  to: RouteLocationNormalized,
  from: RouteLocationNormalized,
  saved: { left: number; top: number } | null,
) {
  if (saved) return saved
  // A change of filters keeps the place; a change of page starts at the top.
  return to.path === from.path ? false : { top: 0 }
}
