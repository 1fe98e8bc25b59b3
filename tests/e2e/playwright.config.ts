import { mkdtempSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { defineConfig } from '@playwright/test'
import { chromiumArguments, findChromium } from '../support/chromium.ts'

const projectRoot = join(import.meta.dirname, '../..')
// Workers read this file again: what the first reading chose is handed on in the environment.
const dataDir = (process.env.SIXTEENTH_E2E_DATA ??= mkdtempSync(join(tmpdir(), 'sixteenth-e2e-')))

export default defineConfig({
  testDir: '.',
  outputDir: join(projectRoot, 'test-results'),
  globalTeardown: './support/removeData.ts',
  fullyParallel: true,
  workers: 2,
  forbidOnly: true,
  timeout: 30_000,
  use: {
    // The port is the one the server says it has taken.
    baseURL: `http://127.0.0.1:${process.env.SIXTEENTH_PORT}`,
    browserName: 'chromium',
    locale: 'en-US',
    colorScheme: 'light',
    trace: { mode: 'retain-on-failure', screenshots: false },
    launchOptions: { executablePath: findChromium(), args: chromiumArguments },
  },
  projects: [
    { name: 'phone', use: { viewport: { width: 390, height: 844 }, hasTouch: true, isMobile: true } },
    // What does not depend on the screen is tried on one of them.
    {
      name: 'desk',
      use: { viewport: { width: 1440, height: 900 } },
      testIgnore: /(links|width)\.spec\.ts/,
    },
  ],
  webServer: {
    command: 'node --import tsx server/index.ts',
    cwd: projectRoot,
    wait: { stdout: /http:\/\/127\.0\.0\.1:(?<SIXTEENTH_PORT>\d+)/ },
    env: {
      NODE_ENV: 'test',
      HOST: '127.0.0.1',
      PORT: '0',
      DATA_DIR: dataDir,
      CHECK_RATE_PER_MINUTE: 'off',
    },
  },
})
