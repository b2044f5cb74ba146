/** The part of Vite's manifest.json that tells which file loads which. */
export type Manifest = Record<
  string,
  { file: string; imports?: string[]; isEntry?: boolean; src?: string }
>

export interface PageSize {
  /** File name without `.vue`. */
  page: string
  /** Gzip bytes of JavaScript until the page can show. */
  bytes: number
  /** The files, in the order of loading. */
  files: string[]
}

const kB = 1000

/** The most that two pages may load, gzip bytes: the door, and the page used at the kiln. */
export const BUDGETS: Record<string, number> = {
  SignInPage: 175 * kB,
  FiringReportPage: 235 * kB,
}

const ENTRY = 'index.html'

/** The layout that the router shows around a page; others have AppLayout. */
const LAYOUTS: Record<string, string> = {
  SignInPage: 'SignedOutLayout',
  SetPasswordPage: 'SignedOutLayout',
  FiringReportPage: 'KilnLayout',
}

/**
 * First load of every page of the manifest: the entry, the page's layout and the page itself, each
 * with what it imports statically. What a page fetches later (a chart, a dialog) is left out.
 *
 * @param sizeOf gzip bytes of a built file
 * @throws Error when the manifest has no entry or no page
 */
export function pageSizes(manifest: Manifest, sizeOf: (file: string) => number): PageSize[] {
  if (!manifest[ENTRY]) throw new Error(`manifest.json has no ${ENTRY}`)
  const pages = Object.keys(manifest).flatMap((key) => {
    const page = /^src\/pages\/(?:.*\/)?([^/]+)\.vue$/.exec(key)?.[1]
    return page ? [{ key, page }] : []
  })
  if (pages.length === 0) throw new Error('manifest.json has no page of src/pages')
  return pages
    .map(({ key, page }) => {
      const layout = `src/layouts/${LAYOUTS[page] ?? 'AppLayout'}.vue`
      const files = closure(manifest, [ENTRY, layout, key])
      return { page, files, bytes: files.reduce((sum, file) => sum + sizeOf(file), 0) }
    })
    .sort((a, b) => a.page.localeCompare(b.page))
}

/** The scripts behind some manifest keys, each once; a key that is no chunk of its own adds none. */
function closure(manifest: Manifest, keys: string[]): string[] {
  const files = new Set<string>()
  const seen = new Set<string>()
  const visit = (key: string): void => {
    const chunk = manifest[key]
    if (!chunk || seen.has(key)) return
    seen.add(key)
    if (chunk.file.endsWith('.js')) files.add(chunk.file)
    chunk.imports?.forEach(visit)
  }
  keys.forEach(visit)
  return [...files]
}

/**
 * What breaks a budget, one sentence each.
 *
 * @param hasCharts whether a built file holds the chart library
 */
export function overBudget(pages: PageSize[], hasCharts: (file: string) => boolean): string[] {
  const shown = (bytes: number): string => (bytes / kB).toFixed(1)
  return Object.entries(BUDGETS).flatMap(([name, budget]) => {
    const page = pages.find((each) => each.page === name)
    if (!page) return [`${name}: there is no such page, but it has a budget.`]
    const charts = page.files.find(hasCharts)
    return [
      ...(page.bytes > budget
        ? [`${name}: ${shown(page.bytes)} kB is more than the ${shown(budget)} kB allowed.`]
        : []),
      ...(charts ? [`${name}: loads the charts at once (${charts}).`] : []),
    ]
  })
}
