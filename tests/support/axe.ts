import { AxeBuilder } from '@axe-core/playwright'
import type { Page } from '@playwright/test'

const TAGS = ['wcag2a', 'wcag2aa', 'wcag21aa', 'wcag22aa']

/**
 * What axe finds wrong with the page that is open, with the elements that have it. The window is made
 * as long as the page first: what a fixed bar covers for the moment is not too small to touch.
 */
export async function problemsOf(page: Page): Promise<unknown[]> {
  const height = await page.evaluate(() => document.documentElement.scrollHeight)
  const width = page.viewportSize()?.width ?? 1280
  const before = page.viewportSize()
  await page.setViewportSize({ width, height: height + 200 })
  const { violations } = await new AxeBuilder({ page }).withTags(TAGS).analyze()
  if (before) await page.setViewportSize(before)
  return violations.map(({ id, impact, nodes }) => ({
    id,
    impact,
    nodes: nodes.map(({ html }) => html),
  }))
}
