import { expect, test } from '@playwright/test'
import { problemsOf } from '../support/axe.js'
import { EDUCATION_LEAD, open, OWNER, TECHNICIAN } from '../support/kilnRoom.js'

const AT = `/${OWNER.network}`
const ADMIN = { email: 'bram@example.org' }

test.describe('signing in', () => {
  test('a wrong password is told beside the form, and nobody is let in', async ({ page }) => {
    await page.goto('/sign-in')
    await page.getByLabel('E-mail address').fill('maud@example.org')
    await page.getByLabel('Password').fill('not-the-password')
    await page.getByRole('button', { name: 'Sign in', exact: true }).click()
    await expect(
      page.getByText('That e-mail address and password do not go together.'),
    ).toBeVisible()
    await expect(page).toHaveURL(/sign-in/)
  })

  test('a page asked for before signing in is the one that opens after it', async ({ page }) => {
    await page.goto(`${AT}/losses?kind=bisque`)
    await expect(page).toHaveURL(/sign-in/)
    await page.getByRole('button', { name: 'Owner of Otter Stair and Mooring Loft' }).click()
    await expect(page).toHaveURL(/losses\?kind=bisque/)
    await expect(page.getByRole('button', { name: 'Kind of firing: bisque firings' })).toBeVisible()
  })

  test('a link that was never made says so', async ({ page }) => {
    await page.goto('/invite/no-such-link')
    await expect(page.getByRole('heading', { level: 1 })).toContainText('no longer works')
  })
})

test.describe('losses', () => {
  test('the rate stands with its counts, interval and coverage', async ({ page }) => {
    await open(page, OWNER, `${AT}/losses`)
    const answer = page.getByRole('heading', { level: 1 })
    await expect(answer).toContainText(
      /\d+\.\d % of pieces were lost: [\d,]+ of [\d,]+ in \d+ firings\. Likely between/,
    )
    await expect(page.getByText(/The kilns count \d+ firings/)).toBeVisible()
  })

  test('the words of the sentence are the address, and change the answer', async ({ page }) => {
    await open(page, OWNER, `${AT}/losses`)
    await page.getByRole('button', { name: 'What is counted: Losses' }).click()
    await page.getByRole('option', { name: /Waste/ }).click()
    await expect(page).toHaveURL(/measure=waste/)
    await expect(page.getByRole('heading', { level: 1 })).toContainText('were wasters')
  })

  test('the chart is a table too, and a month opens its firings', async ({ page }) => {
    await open(page, OWNER, `${AT}/losses`)
    const months = page.getByRole('region', { name: 'Month by month' })
    await months.getByRole('button', { name: 'as a table' }).click()
    await months.getByRole('row').nth(2).getByRole('link').click()
    await expect(page).toHaveURL(/firings\?.*from=\d{4}-\d\d-01/)
  })

  test('a kind of firing that was never reported says so in words', async ({ page }) => {
    await open(page, TECHNICIAN, `${AT}/losses?kind=lustre&from=2020-01&to=2020-03`)
    await expect(page.getByText('No firing is reported here yet')).toBeVisible()
  })
})

test.describe('settings', () => {
  test('an owner adds a kiln, archives it and takes that back', async ({ page }, { project }) => {
    const name = `Heron ${project.name} ${Date.now() % 1_000_000}`
    await open(page, OWNER, `${AT}/settings/kilns`)
    await page.getByRole('button', { name: 'Add a kiln' }).click()
    const sheet = page.getByRole('dialog', { name: 'New kiln' })
    await sheet.getByRole('button', { name: 'Add' }).click()
    await expect(sheet.getByText('Enter a name.')).toBeVisible()
    await sheet.getByLabel('Name').fill(name)
    await sheet.getByRole('button', { name: 'Add' }).click()
    await expect(page.getByRole('row', { name: new RegExp(name) })).toBeVisible()
    await page.getByRole('button', { name: `Archive ${name}` }).click()
    await expect(page.getByRole('row', { name: new RegExp(name) })).toHaveCount(0)
    await page.getByRole('button', { name: 'Undo' }).click()
    await expect(page.getByRole('row', { name: new RegExp(name) })).toBeVisible()
  })

  test('a person that the admin adds sets a password through the link and sees their studio', async ({
    page,
    browser,
  }, { project }) => {
    const email = `robin-${project.name}-${Date.now()}@example.org`
    await open(page, ADMIN, `${AT}/settings/people`)
    await page.getByRole('button', { name: 'Add a person' }).click()
    const sheet = page.getByRole('dialog', { name: 'Add a person' })
    await sheet.getByLabel('Name').fill('Robin')
    await sheet.getByLabel('E-mail address').fill(email)
    await sheet.getByRole('button', { name: 'Add and make a link' }).click()
    const url = await page.getByRole('textbox', { name: 'One-time link' }).inputValue()
    const context = await browser.newContext()
    const theirs = await context.newPage()
    await theirs.goto(new URL(url).pathname)
    await theirs.getByLabel('New password').fill('short')
    await theirs.getByRole('button', { name: 'Set it and sign in' }).click()
    await expect(theirs.getByText('At least 12 characters: a few words are fine.')).toBeVisible()
    await theirs.getByLabel('New password').fill('slip and score and wrap')
    await theirs.getByRole('button', { name: 'Set it and sign in' }).click()
    await expect(theirs).toHaveURL(/today/)
    await context.close()
  })

  test('a technician reads the lists and changes none', async ({ page }) => {
    await open(page, TECHNICIAN, `${AT}/settings/glazes`)
    await expect(page.getByRole('table')).toBeVisible()
    await expect(page.getByRole('button', { name: /^(Add|Edit|Archive)/ })).toHaveCount(0)
    await page.goto(`${AT}/settings/jobs`)
    await expect(page.getByText(/your roles do not/i)).toBeVisible()
  })
})

for (const theme of ['light', 'dark'] as const) {
  test(`sign-in has no accessibility problem, ${theme}`, async ({ page }) => {
    await page.emulateMedia({ colorScheme: theme })
    await page.goto('/sign-in')
    await expect(page.getByRole('heading', { name: 'Sign in' })).toBeVisible()
    expect(await problemsOf(page)).toEqual([])
  })

  test(`today, losses and findings have no accessibility problem, ${theme}`, async ({ page }) => {
    test.setTimeout(120_000)
    await page.emulateMedia({ colorScheme: theme })
    await open(page, EDUCATION_LEAD, `${AT}/findings`)
    const first = page.getByRole('region', { name: 'Surest first' }).getByRole('link').nth(1)
    await expect(first).toBeVisible()
    expect(await problemsOf(page)).toEqual([])
    await first.click()
    await expect(page.getByRole('region', { name: 'How sure' })).toBeVisible()
    expect(await problemsOf(page)).toEqual([])
    await page.goto(`${AT}/losses`)
    await expect(
      page.getByRole('region', { name: 'By kiln' }).getByRole('row').nth(1),
    ).toBeVisible()
    expect(await problemsOf(page)).toEqual([])
    await page.goto(`${AT}/today`)
    await expect(page.getByRole('heading', { level: 1 })).toBeVisible()
    await expect(page.getByRole('region', { name: 'Last firings' })).toBeVisible()
    expect(await problemsOf(page)).toEqual([])
  })

  test(`settings and account have no accessibility problem, ${theme}`, async ({ page }) => {
    test.setTimeout(120_000)
    await page.emulateMedia({ colorScheme: theme })
    await open(page, ADMIN, '/account')
    await expect(page.getByRole('heading', { name: 'Password' })).toBeVisible()
    expect(await problemsOf(page)).toEqual([])
    for (const section of [
      'studios',
      'kilns',
      'clay-bodies',
      'practices',
      'classes',
      'people',
      'jobs',
    ]) {
      await page.goto(`${AT}/settings/${section}`)
      await expect(page.getByRole('table').first()).toBeVisible()
      expect(await problemsOf(page), section).toEqual([])
    }
  })
}
