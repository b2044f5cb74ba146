import { resolve } from 'node:path'
import { defineConfig } from '@playwright/test'

/**
 * Browser tests against a server that runs already: `npm test -- --only e2e` starts one with the demo
 * and sets E2E_BASE_URL (its address), E2E_OUTPUT (folder for pictures of failures) and E2E_REPORT
 * (file for the counts). Debian's Chromium, cut off from every other host.
 */
const top = resolve(import.meta.dirname, '..')
const { E2E_BASE_URL, E2E_OUTPUT, E2E_REPORT, CHROMIUM_PATH } = process.env
if (!E2E_BASE_URL) throw new Error('E2E_BASE_URL is not set; `npm test -- --only e2e` sets it')

export default defineConfig({
  testDir: resolve(top, 'tests/e2e'),
  outputDir: E2E_OUTPUT ?? resolve(top, 'test-results'),
  reporter: E2E_REPORT ? [['list'], ['json', { outputFile: E2E_REPORT }]] : [['list']],
  forbidOnly: true,
  retries: 0,
  workers: 2,
  timeout: 60_000,
  expect: { timeout: 10_000 },
  use: {
    baseURL: E2E_BASE_URL,
    locale: 'en-GB',
    timezoneId: 'Europe/London',
    serviceWorkers: 'block',
    screenshot: 'only-on-failure',
    launchOptions: {
      executablePath: CHROMIUM_PATH ?? '/usr/bin/chromium',
      args: [
        '--no-sandbox',
        '--disable-gpu',
        '--disable-quic',
        '--no-first-run',
        '--disable-background-networking',
        '--disable-component-update',
        '--disable-sync',
        '--disable-default-apps',
        '--no-proxy-server',
        '--host-resolver-rules=MAP * ~NOTFOUND, EXCLUDE 127.0.0.1, EXCLUDE localhost',
      ],
    },
  },
  projects: [
    { name: 'desk', use: { viewport: { width: 1280, height: 800 } } },
    {
      name: 'phone',
      // The chain goes from the phone to the desk by itself.
      testIgnore: '**/chain.spec.ts',
      use: {
        viewport: { width: 390, height: 844 },
        deviceScaleFactor: 2,
        isMobile: true,
        hasTouch: true,
      },
    },
  ],
})
