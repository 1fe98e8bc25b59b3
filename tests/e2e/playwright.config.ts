import { execFileSync } from 'node:child_process'
import { mkdtempSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { defineConfig } from '@playwright/test'

const projectRoot = join(import.meta.dirname, '../..')
const port = 3117

function findChromium(): string {
  return execFileSync('sh', ['-c', 'command -v chromium || command -v chromium-browser'], {
    encoding: 'utf8',
  }).trim()
}

export default defineConfig({
  testDir: '.',
  outputDir: join(projectRoot, 'test-results'),
  fullyParallel: true,
  workers: 2,
  forbidOnly: true,
  timeout: 30_000,
  use: {
    baseURL: `http://127.0.0.1:${port}`,
    browserName: 'chromium',
    trace: 'retain-on-failure',
    launchOptions: {
      executablePath: findChromium(),
      args: [
        '--no-sandbox',
        '--disable-gpu',
        '--disable-quic',
        '--no-first-run',
        '--disable-background-networking',
        '--disable-component-update',
        '--disable-sync',
      ],
    },
  },
  projects: [
    { name: 'phone', use: { viewport: { width: 390, height: 844 }, hasTouch: true, isMobile: true } },
    { name: 'desk', use: { viewport: { width: 1440, height: 900 } } },
  ],
  webServer: {
    command: 'node --import tsx server/index.ts',
    cwd: projectRoot,
    url: `http://127.0.0.1:${port}/api/v1/health`,
    reuseExistingServer: false,
    env: {
      NODE_ENV: 'test',
      HOST: '127.0.0.1',
      PORT: String(port),
      DATA_DIR: mkdtempSync(join(tmpdir(), 'sixteenth-e2e-')),
      CHECK_RATE_PER_MINUTE: 'off',
    },
  },
})
