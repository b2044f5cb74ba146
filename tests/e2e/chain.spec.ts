import type { Browser, Page } from '@playwright/test'
import { expect, test } from '@playwright/test'
import { DEMO_PASSWORD } from '../../server/shared/demo.js'
import { fill, PATHS } from '../../server/contract/paths.js'
import { EDUCATION_LEAD, OWNER, TECHNICIAN } from '../support/kilnRoom.js'

/**
 * The whole chain, as the people of one network play it one after the other: the technician at phone
 * size, owner, admin and education lead at the desk, and somebody of another network at the end. It
 * sets its own sizes, so it runs once.
 */
const ADMIN = { email: 'bram@example.org' }
const STRANGER = { email: 'orla@example.org', network: 'salt-pair' }
const AT = `/${TECHNICIAN.network}`
const PHONE = { viewport: { width: 390, height: 844 }, isMobile: true, hasTouch: true }
const DESK = { viewport: { width: 1280, height: 800 } }

/** A browser of its own, signed in through the sign-in page. */
async function signIn(
  browser: Browser,
  who: { email: string },
  size: typeof PHONE | typeof DESK,
): Promise<Page> {
  const context = await browser.newContext({
    ...size,
    locale: 'en-GB',
    timezoneId: 'Europe/London',
  })
  const page = await context.newPage()
  await page.goto('/sign-in')
  await page.getByLabel('E-mail address').fill(who.email)
  await page.getByLabel('Password').fill(DEMO_PASSWORD)
  await page.getByRole('button', { name: 'Sign in', exact: true }).click()
  await expect(page).toHaveURL(/\/today$/)
  return page
}

/** Lost and all pieces of the answer of the losses page. */
async function rate(page: Page): Promise<{ events: number; pieces: number }> {
  const answer = page.getByRole('heading', { level: 1 })
  await expect(answer).toContainText(/[\d,]+ of [\d,]+/)
  const [, events = '', pieces = ''] = /([\d,]+) of ([\d,]+)/.exec(await answer.innerText()) ?? []
  const number = (text: string): number => Number(text.replaceAll(',', ''))
  return { events: number(events), pieces: number(pieces) }
}

test('pack, report two faults, amend, see the rate change, study, open a finding; a stranger sees none of it', async ({
  browser,
}) => {
  test.setTimeout(240_000)
  let firing = ''
  let kiln = ''

  await test.step('the technician packs a load on the phone', async () => {
    const page = await signIn(browser, TECHNICIAN, PHONE)
    await page.getByRole('link', { name: 'Pack a firing' }).click()
    await page.getByLabel('Kiln', { exact: true }).selectOption({ index: 1 })
    kiln =
      (await page.getByLabel('Kiln', { exact: true }).locator('option:checked').innerText())
        .split(/[,·(]/)[0]
        ?.trim() ?? ''
    // A kind that no other test reports: its rate moves by this firing alone.
    await page.getByLabel('Kind of firing').selectOption('single')
    await page.getByRole('spinbutton', { name: 'Pieces in all' }).fill('30')
    await page.getByRole('button', { name: 'Count a lot of like pieces' }).click()
    await page.getByRole('spinbutton', { name: 'Pieces', exact: true }).fill('12')
    await page.getByLabel('Form', { exact: true }).selectOption({ label: 'mugs' })
    await page.getByRole('button', { name: 'Pack 30 pieces' }).click()
    await expect(page.getByRole('heading', { level: 1 })).toContainText('30 pieces went in')
    const uid = /firings\/([0-9a-f-]{36})/.exec(page.url())?.[1]
    const link = await page
      .getByRole('link', { name: /report/i })
      .first()
      .getAttribute('href')
    firing = uid ?? /firings\/([0-9a-f-]{36})/.exec(link ?? '')?.[1] ?? ''
    expect(firing).not.toBe('')
    await page.context().close()
  })

  const owner = await signIn(browser, OWNER, DESK)
  const losses = `${AT}/losses?kind=single`
  await owner.goto(losses)
  const before = await rate(owner)

  await test.step('the technician reports it with two faults and amends it', async () => {
    const page = await signIn(browser, TECHNICIAN, PHONE)
    await page.goto(`${AT}/firings/${firing}/report`)
    const piece = (at: number) =>
      page
        .getByRole('group', { name: 'Mugs', exact: true })
        .getByRole('button')
        .nth(at - 1)
    await page.getByText('S-crack', { exact: true }).click()
    await piece(2).click()
    await page.getByText('Joint crack', { exact: true }).click()
    await piece(5).click()
    await piece(6).click()
    await page.getByRole('button', { name: 'Others sound' }).click()
    await page.getByRole('button', { name: 'Report 30 pieces' }).click()
    await expect(page.getByRole('heading', { level: 1 })).toContainText('3 of 30 pieces were lost')
    await page.getByRole('link', { name: 'Amend the report' }).click()
    await page.getByText('Dunt', { exact: true }).click()
    await piece(9).click()
    await page.getByRole('button', { name: 'Amend…' }).click()
    const why = page.getByRole('dialog', { name: 'Amend the report' })
    await why.getByLabel('Why').fill('Rang them all again.')
    await why.getByRole('button', { name: 'Amend', exact: true }).click()
    await expect(page.getByRole('heading', { level: 1 })).toContainText('4 of 30 pieces were lost')
    await page.context().close()
  })

  await test.step('the owner sees the rate change, and the firing behind it', async () => {
    await owner.goto(losses)
    await expect
      .poll(async () => rate(owner))
      .toEqual({ events: before.events + 4, pieces: before.pieces + 30 })
    await owner
      .getByRole('row', { name: new RegExp(kiln) })
      .getByRole('link')
      .first()
      .click()
    await expect(owner).toHaveURL(/firings\?.*kiln=/)
    await expect(owner.locator(`a[href*="${firing}"]`).first()).toBeVisible()
    await owner.context().close()
  })

  await test.step('the admin runs the study', async () => {
    const page = await signIn(browser, ADMIN, DESK)
    await page.goto(`${AT}/settings/jobs`)
    const study = page.getByRole('region', { name: 'Study', exact: true })
    await study.getByRole('button', { name: /Run now/ }).click()
    const newest = page
      .getByRole('table', { name: 'Last runs of the jobs' })
      .getByRole('row')
      .nth(1)
    await expect(newest).toContainText('Bram')
    await expect(newest).toContainText('done', { timeout: 120_000 })
    await page.context().close()
  })

  let finding = ''
  await test.step('the education lead opens a finding of it', async () => {
    const page = await signIn(browser, EDUCATION_LEAD, DESK)
    await page.goto(`${AT}/findings`)
    await expect(page.getByRole('heading', { level: 1 })).toContainText(/findings? of/)
    await page.getByRole('region', { name: 'Surest first' }).getByRole('link').nth(1).click()
    await expect(page).toHaveURL(/findings\/[0-9a-f-]{36}/)
    await expect(page.getByRole('region', { name: 'How sure' })).toContainText(/q (under )?0\.\d+/)
    finding = page.url().split('/').at(-1) ?? ''
    await page.getByRole('link', { name: 'The firings behind it' }).click()
    await expect(page).toHaveURL(/firings\?/)
    await expect(page.getByRole('row').nth(1)).toBeVisible()
    await page.context().close()
  })

  await test.step('somebody of another network sees none of it', async () => {
    const page = await signIn(browser, STRANGER, DESK)
    for (const path of [
      `${AT}/today`,
      `${AT}/firings/${firing}`,
      `${AT}/findings/${finding}`,
      `/${STRANGER.network}/firings/${firing}`,
    ]) {
      await page.goto(path)
      await expect(page.getByRole('heading', { level: 1 })).toContainText(/nothing|not|no /i)
    }
    const own = { network: STRANGER.network, firing }
    for (const network of [TECHNICIAN.network, STRANGER.network]) {
      const answer = await page.request.get(fill(PATHS.firing, { ...own, network }))
      expect(answer.status()).toBe(404)
    }
    await page.context().close()
  })
})
