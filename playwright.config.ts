import { defineConfig } from '@playwright/test'
import { CHROMIUM_FLAGS, findChromium } from './tests/support/chromium'

/** Each of the two workers starts a server and stand-ins of its own; see tests/browser. */
export default defineConfig({
  testDir: 'tests/browser',
  outputDir: '.test/browser',
  globalSetup: './tests/support/once.ts',
  fullyParallel: true,
  forbidOnly: true,
  workers: 2,
  retries: 0,
  timeout: 60_000,
  reporter: [['line'], ['json', { outputFile: '.test/browser.json' }]],
  use: {
    browserName: 'chromium',
    trace: 'off',
    screenshot: 'only-on-failure',
    launchOptions: { executablePath: findChromium(), args: CHROMIUM_FLAGS },
  },
})
