import { defineConfig, devices } from '@playwright/test'

// npm test -- --only browser starts the built product and hands its addresses over; nothing is started from here.
const baseURL = process.env.BASE_URL

// Chromium will not sandbox itself as root, which is who runs this in a container.
const asRoot = process.getuid?.() === 0

export default defineConfig({
  testDir: 'tests/e2e',
  outputDir: 'test-results',
  forbidOnly: true,
  retries: 0,
  workers: 1,
  timeout: 60_000,
  expect: { timeout: 10_000 },
  reporter: [['list'], ['json', { outputFile: process.env.TEST_REPORT ?? 'test-results/report.json' }]],
  use: {
    ...devices['Desktop Chrome'],
    baseURL,
    locale: 'en-GB',
    timezoneId: 'Europe/Berlin',
    trace: 'retain-on-failure',
    launchOptions: { executablePath: '/usr/bin/chromium', args: asRoot ? ['--no-sandbox'] : [] },
  },
})
