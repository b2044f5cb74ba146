import type { Page } from '@playwright/test'
import { expect, test } from '@playwright/test'
import type { FiringDetail } from '../../server/contract/firings.js'
import { problemsOf } from '../support/axe.js'
import {
  EDUCATION_LEAD,
  firingOf,
  open,
  OWNER,
  packed,
  TECHNICIAN,
  write,
} from '../support/kilnRoom.js'

const AT = `/${TECHNICIAN.network}`
const board = (page: Page, name: string) => page.getByRole('group', { name, exact: true })
const piece = (page: Page, lot: string, at: number) =>
  board(page, lot)
    .getByRole('button')
    .nth(at - 1)
const report = (firing: FiringDetail): string => `${AT}/firings/${firing.uid}/report`

/** Two lots and a rest: 6 mugs, 4 bowls, 10 in no lot. */
async function waitingFiring(
  page: Page,
  kind: 'glaze' | 'bisque' = 'glaze',
): Promise<FiringDetail> {
  await open(page, TECHNICIAN, `${AT}/firings`)
  return packed(page, TECHNICIAN, {
    kind,
    pieces: 20,
    lots: [
      { pieces: 6, form: 'mugs' },
      { pieces: 4, form: 'bowls' },
    ],
  })
}

test.describe('packing', () => {
  test('a load of 100 pieces with three lots is packed, the rest counted by itself', async ({
    page,
  }) => {
    await open(page, TECHNICIAN, `${AT}/firings/new`)
    await page.getByLabel('Kiln', { exact: true }).selectOption({ index: 1 })
    await page.getByRole('spinbutton', { name: 'Pieces in all' }).fill('100')
    await page.getByRole('button', { name: 'Count a lot of like pieces' }).click()
    for (const [index, pieces] of ['12', '20', '10'].entries()) {
      const field = page.getByRole('spinbutton', { name: 'Pieces', exact: true })
      await expect(field).toBeFocused()
      await field.fill(pieces)
      await page.getByLabel('Form', { exact: true }).selectOption({ index: index + 1 })
      if (index < 2) await page.keyboard.press('Alt+Enter')
    }
    await expect(page.getByText('58 of 100 pieces, in no lot')).toBeVisible()
    await page.getByRole('button', { name: 'Pack 100 pieces' }).click()
    await expect(page.getByRole('heading', { level: 1 })).toContainText('100 pieces went in')
    await expect(page.getByText('It waits for you on Today', { exact: false })).toBeVisible()
  })

  test('lots are doubled and taken away by keys, and come back with Undo', async ({ page }) => {
    await open(page, TECHNICIAN, `${AT}/firings/new`)
    await page.getByRole('spinbutton', { name: 'Pieces in all' }).fill('30')
    await page.keyboard.press('Alt+Enter')
    await expect(page.getByRole('spinbutton', { name: 'Pieces', exact: true })).toBeFocused()
    await page.keyboard.type('9')
    await page.keyboard.press('Control+d')
    await expect(page.getByText('12 of 30 pieces, in no lot')).toBeVisible()
    await page.keyboard.press('Alt+Delete')
    await expect(page.getByText('21 of 30 pieces, in no lot')).toBeVisible()
    await page.getByRole('button', { name: 'Undo' }).click()
    await expect(page.getByText('12 of 30 pieces, in no lot')).toBeVisible()
  })

  test('what is missing is said beside its field, and the lots cannot hold more than the load', async ({
    page,
  }) => {
    await open(page, TECHNICIAN, `${AT}/firings/new`)
    await page.getByRole('button', { name: 'Count a lot of like pieces' }).click()
    await page.getByRole('button', { name: 'Pack it' }).click()
    await expect(page.getByText('Which kiln?')).toBeVisible()
    await expect(page.getByText('How many pieces?', { exact: true })).toBeVisible()
    await page.getByRole('spinbutton', { name: 'Pieces', exact: true }).fill('12')
    await page.getByRole('spinbutton', { name: 'Pieces in all' }).fill('10')
    await page.getByRole('button', { name: 'Pack 10 pieces' }).click()
    await expect(page.getByText('The lots hold 12 pieces, 2 more than the firing.')).toBeVisible()
  })

  test('a load that was begun is there again after a reload', async ({ page }) => {
    await open(page, TECHNICIAN, `${AT}/firings/new`)
    await page.getByRole('spinbutton', { name: 'Pieces in all' }).fill('37')
    await page.getByRole('button', { name: 'Count a lot of like pieces' }).click()
    await page.getByRole('spinbutton', { name: 'Pieces', exact: true }).fill('9')
    await page.reload()
    await expect(page.getByText('28 of 37 pieces, in no lot')).toBeVisible()
    await expect(page.getByText('Taken up where it was left', { exact: false })).toBeVisible()
  })

  test('a firing that was never packed here goes straight to its report', async ({ page }) => {
    await open(page, TECHNICIAN, `${AT}/firings/new`)
    await page.getByRole('link', { name: 'never packed here? just report it' }).click()
    await page.getByLabel('Kiln', { exact: true }).selectOption({ index: 1 })
    await page.getByRole('spinbutton', { name: 'Pieces in all' }).fill('14')
    await page.getByRole('button', { name: 'Go on to its report' }).click()
    await expect(board(page, 'The whole load').getByRole('button')).toHaveCount(14)
  })
})

test.describe('reporting', () => {
  test('a clean firing takes two touches', async ({ page }) => {
    const firing = await waitingFiring(page)
    await page.goto(report(firing))
    await page.getByRole('button', { name: 'All sound', exact: true }).click()
    await page.getByRole('button', { name: 'Report 20 pieces' }).click()
    await expect(page.getByRole('heading', { level: 1 })).toContainText(
      'None of 20 pieces was lost',
    )
  })

  test('two faults are marked by touch, one is taken back, and the firing says what was lost', async ({
    page,
  }) => {
    const firing = await waitingFiring(page)
    await page.goto(report(firing))
    await page.getByText('S-crack', { exact: true }).click()
    await piece(page, 'Mugs', 2).click()
    await piece(page, 'Mugs', 3).click()
    await piece(page, 'Mugs', 3).click()
    await expect(piece(page, 'Mugs', 2)).toHaveAccessibleName('piece 2: waster, S-crack')
    await expect(piece(page, 'Mugs', 3)).toHaveAccessibleName('piece 3: sound')
    await page.getByText('Warped', { exact: true }).click()
    await piece(page, 'Bowls', 1).click()
    await page.getByRole('button', { name: 'Others sound' }).click()
    await page.getByRole('button', { name: 'Report 20 pieces' }).click()
    await expect(page.getByRole('heading', { level: 1 })).toContainText(
      '1 of 20 pieces was lost: 1 waster; 1 second.',
    )
    await expect(page.getByText('S-crack: 1 waster')).toBeVisible()
    await expect(page.getByText('Warping: 1 second')).toBeVisible()
  })

  test('lots of which nothing was said are asked about before it is sent', async ({ page }) => {
    const firing = await waitingFiring(page)
    await page.goto(report(firing))
    await page.getByText('S-crack', { exact: true }).click()
    await piece(page, 'Mugs', 1).click()
    await page.getByRole('button', { name: 'Report 20 pieces' }).click()
    const asked = page.getByRole('dialog', { name: 'And the others?' })
    await expect(asked).toContainText('Bowls')
    await asked.getByRole('button', { name: 'Not looked at: report' }).click()
    await expect(page.getByRole('heading', { level: 1 })).toContainText('1 of 6 pieces was lost')
  })

  test('any name of the trade finds its fault, and a further fault and a neighbour are noted on the piece', async ({
    page,
  }) => {
    const firing = await waitingFiring(page)
    await page.goto(report(firing))
    await page.getByRole('button', { name: 'Other…' }).click()
    await page.getByRole('combobox', { name: 'What do you see?' }).fill('handle off')
    // The names of the trade arrive with the sheet.
    await expect(
      page.getByRole('option', { name: /Handle or spout|handle or spout/ }).first(),
    ).toBeVisible()
    await page.keyboard.press('Enter')
    await piece(page, 'Mugs', 4).click()
    await page.getByRole('button', { name: 'a neighbour did it' }).click()
    await page.getByRole('button', { name: 'more…' }).click()
    await page.getByRole('button', { name: 'Another fault on the same piece' }).click()
    await page.getByRole('option', { name: 'Crazing', exact: true }).click()
    await page.getByRole('button', { name: 'Done' }).click()
    await expect(piece(page, 'Mugs', 4)).toHaveAccessibleName(
      'piece 4: waster, Handle or spout, also crazing, a neighbour did it',
    )
  })

  test('a bisque offers no fault of the glaze', async ({ page }) => {
    const firing = await waitingFiring(page, 'bisque')
    await page.goto(report(firing))
    await expect(page.getByRole('radio', { name: 'S-crack' })).toBeAttached()
    await expect(page.getByRole('radio', { name: 'Crazing' })).toHaveCount(0)
  })

  test('a lot over 60 pieces is counted, never beyond its pieces', async ({ page }) => {
    await open(page, TECHNICIAN, `${AT}/firings`)
    const firing = await packed(page, TECHNICIAN, { pieces: 80 })
    await page.goto(report(firing))
    await page.getByText('Dunt', { exact: true }).click()
    await page.getByRole('button', { name: 'Count Dunt, waster' }).click()
    await page.getByRole('spinbutton', { name: 'Dunt, waster: pieces' }).fill('95')
    await page.getByRole('button', { name: 'Report 80 pieces' }).click()
    await expect(page.getByRole('heading', { level: 1 })).toContainText(
      '80 of 80 pieces were lost: 80 wasters.',
    )
  })

  test('without a connection everything is kept, and arrives once when tried again', async ({
    page,
    context,
  }) => {
    const firing = await waitingFiring(page)
    await page.goto(report(firing))
    await page.getByText('S-crack', { exact: true }).click()
    await piece(page, 'Mugs', 2).click()
    await page.getByRole('button', { name: 'Others sound' }).click()
    // The server takes it, and the answer is lost on the way.
    await page.route('**/revisions/*', async (route) => {
      await route.fetch()
      await route.abort()
    })
    await page.getByRole('button', { name: 'Report 20 pieces' }).click()
    await expect(page.getByText('The server cannot be reached', { exact: false })).toBeVisible()
    await context.setOffline(true)
    await page.getByRole('button', { name: 'Try again' }).click()
    await expect(page.getByText('The server cannot be reached', { exact: false })).toBeVisible()
    await expect(piece(page, 'Mugs', 2)).toHaveAccessibleName('piece 2: waster, S-crack')
    await context.setOffline(false)
    await page.unroute('**/revisions/*')
    await page.getByRole('button', { name: 'Try again' }).click()
    await expect(page.getByRole('heading', { level: 1 })).toContainText('1 of 20 pieces was lost')
    expect((await firingOf(page, TECHNICIAN.network, firing.uid)).revision).toBe(2)
  })

  test('a report whose answer was lost is known to have arrived after a reload', async ({
    page,
  }) => {
    const firing = await waitingFiring(page)
    await page.goto(report(firing))
    await page.getByRole('button', { name: 'All sound', exact: true }).click()
    await page.route('**/revisions/*', async (route) => {
      await route.fetch()
      await route.abort()
    })
    await page.getByRole('button', { name: 'Report 20 pieces' }).click()
    await expect(page.getByText('The server cannot be reached', { exact: false })).toBeVisible()
    await page.reload()
    await expect(page.getByText('This report had arrived already.')).toBeVisible()
    await expect(page.getByRole('heading', { level: 1 })).toContainText('None of 20 pieces')
  })

  test('marks that were not sent are there again after a reload', async ({ page }) => {
    const firing = await waitingFiring(page)
    await page.goto(report(firing))
    await page.getByText('S-crack', { exact: true }).click()
    await piece(page, 'Bowls', 4).click()
    await page.reload()
    await expect(piece(page, 'Bowls', 4)).toHaveAccessibleName('piece 4: waster, S-crack')
  })

  test('a firing that somebody reported meanwhile shows both, and mine goes on top as an amendment', async ({
    page,
  }) => {
    const firing = await waitingFiring(page)
    await page.goto(report(firing))
    await page.getByText('S-crack', { exact: true }).click()
    await piece(page, 'Mugs', 2).click()
    await page.getByRole('button', { name: 'Others sound' }).click()
    const sound = firing.lots.map((lot) => ({ lot: lot.uid, notLookedAt: 0, losses: [] }))
    await write(page, TECHNICIAN.network, firing.uid, {
      kind: 'report',
      base: 1,
      deviceTime: null,
      report: {
        openedAt: null,
        openingTemperatureC: null,
        wholeLoadFailed: null,
        note: null,
        lots: sound,
      },
    })
    await page.getByRole('button', { name: 'Report 20 pieces' }).click()
    const changed = page.getByRole('dialog', { name: 'This firing was changed meanwhile' })
    await expect(changed.getByRole('row', { name: /Mugs/ })).toContainText('1 lost')
    await changed.getByRole('button', { name: 'Put mine on top' }).click()
    await page.getByRole('button', { name: 'Amend…' }).click()
    await page.getByRole('button', { name: 'Counted again.' }).click()
    await page
      .getByRole('dialog', { name: 'Amend the report' })
      .getByRole('button', { name: 'Amend', exact: true })
      .click()
    await expect(page.getByRole('heading', { level: 1 })).toContainText('1 of 20 pieces was lost')
  })
})

test('an amendment needs a reason, and the earlier version stays beside it', async ({ page }) => {
  const firing = await waitingFiring(page)
  await page.goto(report(firing))
  await page.getByRole('button', { name: 'All sound', exact: true }).click()
  await page.getByRole('button', { name: 'Report 20 pieces' }).click()
  await page.getByRole('link', { name: 'Amend the report' }).click()
  await page.getByText('Dunt', { exact: true }).click()
  await piece(page, 'Mugs', 1).click()
  await page.getByRole('button', { name: 'Amend…' }).click()
  const why = page.getByRole('dialog', { name: 'Amend the report' })
  await why.getByRole('button', { name: 'Amend', exact: true }).click()
  await expect(why.getByText('Say why.')).toBeVisible()
  await why.getByLabel('Why').fill('Rang it again: it is cracked.')
  await why.getByRole('button', { name: 'Amend', exact: true }).click()
  await expect(page.getByRole('heading', { level: 1 })).toContainText('1 of 20 pieces was lost')
  const written = page.getByRole('region', { name: 'What was written' })
  await expect(written.getByRole('listitem')).toHaveText([
    /amended.*1 lost.*Rang it again/s,
    /reported.*all sound/s,
    /packed.*20 pieces/s,
  ])
})

test('an owner voids a firing with a reason, and it stays to be read', async ({ page }) => {
  await open(page, OWNER, `${AT}/firings`)
  const firing = await packed(page, OWNER, { pieces: 5 })
  await page.goto(`${AT}/firings/${firing.uid}`)
  await page.getByRole('button', { name: 'Further' }).click()
  await page.getByRole('menuitem', { name: 'Void this firing…' }).click()
  await page.getByLabel('Why').fill('Counted twice.')
  await page.getByRole('button', { name: 'Void the firing' }).click()
  await expect(page.getByText('Voided: Counted twice.')).toBeVisible()
})

test('an education lead reads firings, and packs, reports and voids none', async ({ page }) => {
  await open(page, EDUCATION_LEAD, `${AT}/firings?status=reported`)
  await page.getByRole('row').nth(1).getByRole('link').click()
  await expect(page.getByRole('heading', { level: 1 })).toContainText('pieces')
  for (const name of ['Report', 'Amend the report', 'Further'])
    await expect(page.getByText(name, { exact: true })).toHaveCount(0)
  await page.goto(`${page.url()}/report`)
  await expect(page.getByText('Your roles do not open this page')).toBeVisible()
})

test('the words of the list are its address, and go into the file', async ({ page }) => {
  await open(page, OWNER, `${AT}/firings`)
  await page.getByRole('button', { name: 'Kind of firing: Firings of all kinds' }).click()
  await page.getByRole('option', { name: 'Bisque firings' }).click()
  await expect(page).toHaveURL(/\?kind=bisque$/)
  await page.getByRole('button', { name: 'Losses: with or without losses' }).click()
  await page.getByRole('option', { name: 'with losses', exact: true }).click()
  await expect(page).toHaveURL(/kind=bisque&lost=some/)
  await expect(page.getByRole('link', { name: 'as CSV' })).toHaveAttribute(
    'href',
    /firings\.csv\?kind=bisque&lost=some/,
  )
  await page.reload()
  await expect(page.getByRole('button', { name: 'Kind of firing: Bisque firings' })).toBeVisible()
})

const PAGES = {
  list: { path: () => `${AT}/firings`, sign: 'as CSV' },
  load: { path: () => `${AT}/firings/new`, sign: 'Pack it' },
  report: { path: report, sign: 'All sound' },
  firing: {
    path: (firing: FiringDetail) => `${AT}/firings/${firing.uid}`,
    sign: 'What was written',
  },
}
for (const theme of ['light', 'dark'] as const) {
  for (const [name, { path, sign }] of Object.entries(PAGES)) {
    test(`the page of the ${name} has no accessibility problem, ${theme}`, async ({ page }) => {
      await page.emulateMedia({ colorScheme: theme })
      await page.goto(path(await waitingFiring(page)))
      await expect(page.getByText(sign, { exact: true }).first()).toBeAttached()
      expect(await problemsOf(page)).toEqual([])
    })
  }
}
