import { describe, expect, it } from 'vitest'
import { overBudget, pageSizes, type Manifest } from '../../server/cli/pageSizes.js'

const manifest: Manifest = {
  'index.html': { file: 'assets/index.js', isEntry: true, imports: ['_vue.js'] },
  '_vue.js': { file: 'assets/vue.js' },
  '_form.js': { file: 'assets/form.js', imports: ['_vue.js'] },
  'src/layouts/SignedOutLayout.vue': { file: 'assets/signedOut.js', imports: ['index.html'] },
  'src/layouts/AppLayout.vue': { file: 'assets/app.js' },
  'src/layouts/KilnLayout.vue': { file: 'assets/kiln.js' },
  'src/pages/SignInPage.vue': { file: 'assets/signIn.js', imports: ['index.html', '_form.js'] },
  'src/pages/settings/PeoplePage.vue': { file: 'assets/people.js', imports: ['_form.js'] },
  'src/pages/FiringReportPage.vue': { file: 'assets/report.js', imports: ['_form.js'] },
  'src/components/charts/LossChart.vue': { file: 'assets/chart.js' },
}
const each = (bytes: number) => () => bytes

describe('the first load of a page', () => {
  it('is the entry, its layout and its own chunk, each import once', () => {
    const signIn = pageSizes(manifest, each(10)).find(({ page }) => page === 'SignInPage')
    expect(signIn?.files.sort()).toEqual([
      'assets/form.js',
      'assets/index.js',
      'assets/signIn.js',
      'assets/signedOut.js',
      'assets/vue.js',
    ])
    expect(signIn?.bytes).toBe(50)
  })

  it('is told for pages in subfolders too, with the layout of the desk', () => {
    const people = pageSizes(manifest, each(1)).find(({ page }) => page === 'PeoplePage')
    expect(people?.files).toContain('assets/app.js')
  })

  it('cannot be told from a manifest without pages', () => {
    expect(() => pageSizes({ 'index.html': { file: 'a.js' } }, each(1))).toThrow('no page')
  })
})

describe('the budgets', () => {
  it('are kept by small pages', () => {
    expect(overBudget(pageSizes(manifest, each(1000)), () => false)).toEqual([])
  })

  it('name the page that is too heavy, and by how much', () => {
    expect(overBudget(pageSizes(manifest, each(40_000)), () => false)).toEqual([
      'SignInPage: 200.0 kB is more than the 175.0 kB allowed.',
    ])
  })

  it('refuse the charts in what sign-in loads', () => {
    const problems = overBudget(pageSizes(manifest, each(1)), (file) => file === 'assets/vue.js')
    expect(problems).toContain('SignInPage: loads the charts at once (assets/vue.js).')
  })

  it('refuse a manifest that lacks a page with a budget', () => {
    const rest = { ...manifest }
    delete rest['src/pages/SignInPage.vue']
    expect(overBudget(pageSizes(rest, each(1)), () => false)).toEqual([
      'SignInPage: there is no such page, but it has a budget.',
    ])
  })
})
