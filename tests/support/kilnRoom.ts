/** For browser tests of the chain at the kiln: sign in, and firings of one's own, so that tests do not meet. */
import type { APIRequestContext, Page } from '@playwright/test'
import { expect } from '@playwright/test'
import { v7 as makeUid } from 'uuid'
import type { Catalogue } from '../../server/contract/catalogue.js'
import type { FiringDetail, PackBody, RevisionInput } from '../../server/contract/firings.js'
import { fill, PATHS } from '../../server/contract/paths.js'
import { DEMO_PASSWORD } from '../../server/shared/demo.js'
import { addDays, localTime } from '../../server/shared/zonedTime.js'

/** People of the demo and where they work. */
export const TECHNICIAN = {
  email: 'ines@example.org',
  network: 'kettle-ring',
  studio: 'otter-stair',
} as const
export const EDUCATION_LEAD = { email: 'sabine@example.org', network: 'kettle-ring' } as const
export const OWNER = {
  email: 'maud@example.org',
  network: 'kettle-ring',
  studio: 'otter-stair',
} as const

/** What the same-origin check wants to see of a caller that is no browser. */
const headers = (page: Page): Record<string, string> => ({
  'sec-fetch-site': 'same-origin',
  origin: new URL(page.url()).origin,
})

/** Signs in without the sign-in page, and opens a page. */
export async function open(page: Page, who: { email: string }, path: string): Promise<void> {
  await page.goto('/sign-in')
  const answer = await page.request.post(PATHS.session, {
    data: { email: who.email, password: DEMO_PASSWORD },
    headers: headers(page),
  })
  expect(answer.ok(), await answer.text()).toBe(true)
  await page.goto(path)
}

export async function catalogueOf(request: APIRequestContext, network: string): Promise<Catalogue> {
  return (await request.get(fill(PATHS.catalogue, { network }))).json() as Promise<Catalogue>
}

interface Load {
  kind?: PackBody['kind']
  pieces: number
  /** Pieces and name of the form of each lot; the others are the rest. */
  lots?: { pieces: number; form?: string }[]
}

/** A firing of the person's studio, packed yesterday and waiting for its report. */
export async function packed(
  page: Page,
  who: { network: string; studio: string },
  { kind = 'glaze', pieces, lots = [] }: Load,
): Promise<FiringDetail> {
  const catalogue = await catalogueOf(page.request, who.network)
  const studio = catalogue.studios.find(({ slug }) => slug === who.studio)
  const kiln = catalogue.kilns.find((each) => each.studio === studio?.uid && !each.archived)
  if (!studio || !kiln) throw new Error(`No kiln at ${who.studio}`)
  const form = (name: string | undefined): string | null =>
    catalogue.levels.find((level) => level.factor === 'form' && level.name === name)?.uid ?? null
  const pack: PackBody = {
    kiln: kiln.uid,
    kind,
    programme: null,
    cone: '6',
    localDate: addDays(localTime(new Date(), studio.timeZone).day, -1),
    kilnNumber: null,
    pieces,
    about: false,
    levels: {},
    note: null,
    rest: makeUid(),
    turnedAway: [],
    lots: lots.map((lot) => ({
      uid: makeUid(),
      pieces: lot.pieces,
      levels: lot.form ? { form: form(lot.form) } : {},
      glazeOverlap: null,
      refireCount: 0,
      maker: null,
      note: null,
    })),
  }
  return write(page, who.network, makeUid(), { kind: 'pack', base: 0, deviceTime: null, pack })
}

/** Writes a revision as another device would. */
export async function write(
  page: Page,
  network: string,
  firing: string,
  body: RevisionInput,
): Promise<FiringDetail> {
  const answer = await page.request.put(
    fill(PATHS.firingRevision, { network, firing, revision: makeUid() }),
    { data: body, headers: headers(page) },
  )
  expect(answer.ok(), await answer.text()).toBe(true)
  return (await answer.json()) as FiringDetail
}

export async function firingOf(page: Page, network: string, firing: string): Promise<FiringDetail> {
  return (await (
    await page.request.get(fill(PATHS.firing, { network, firing }))
  ).json()) as FiringDetail
}
