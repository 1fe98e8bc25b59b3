/* Everything that must hold before a change is done. A step that fails does not keep the later ones from running. */
import { existsSync, mkdtempSync, readdirSync, readFileSync, rmSync } from 'node:fs'
import { spawnSync } from 'node:child_process'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { buildIfStale, installIfNeeded, projectRoot, run } from './prepare.mjs'

const counts = { passed: 0, failed: 0 }

function hasProgram(name) {
  return spawnSync('sh', ['-c', `command -v ${name}`], { stdio: 'ignore' }).status === 0
}

function hasChromium() {
  return hasProgram('chromium') || hasProgram('chromium-browser')
}

/** Debian's package where it may be installed, else a sentence for the person to act on. */
async function seeToChromium() {
  if (hasChromium()) return true
  if (process.getuid?.() === 0 && hasProgram('apt-get')) {
    console.log('Installing Chromium for the browser tests.')
    const env = { ...process.env, DEBIAN_FRONTEND: 'noninteractive' }
    const options = { env, stdio: ['ignore', 'ignore', 'inherit'] }
    await run('apt-get', ['update'], options)
    await run('apt-get', ['install', '-y', '--no-install-recommends', 'chromium'], options)
  }
  if (hasChromium()) return true
  console.error('The browser tests need Chromium on the PATH: install it (Debian: apt-get install chromium).')
  return false
}

function node(script, ...args) {
  return [process.execPath, [join(projectRoot, 'node_modules', script), ...args]]
}

/** One step that counts as one check. */
async function checkOnce(command, args) {
  const code = await run(command, args)
  counts[code === 0 ? 'passed' : 'failed'] += 1
}

/** Counts what a runner's own report says; a runner that fails without a failed test is a failure too. */
function countReport(code, read) {
  let passed = 0
  let failed = 0
  try {
    ;({ passed, failed } = read())
  } catch {
    console.error('The runner left no report.')
  }
  if (failed === 0 && (code !== 0 || passed === 0)) failed = 1
  counts.passed += passed
  counts.failed += failed
}

function readJson(path) {
  return JSON.parse(readFileSync(path, 'utf8'))
}

async function runVitest(reportDir) {
  const report = join(reportDir, 'vitest.json')
  const reporters = ['--reporter=default', '--reporter=json', `--outputFile.json=${report}`]
  const code = await run(...node('vitest/vitest.mjs', 'run', ...reporters))
  countReport(code, () => {
    const { numPassedTests, numTotalTests } = readJson(report)
    return { passed: numPassedTests, failed: numTotalTests - numPassedTests }
  })
}

function hasBrowserTests() {
  const folder = join(projectRoot, 'tests/e2e')
  return (
    existsSync(folder) && readdirSync(folder, { recursive: true }).some((name) => /\.spec\.ts$/.test(name))
  )
}

async function runPlaywright(reportDir) {
  if (!hasBrowserTests()) {
    console.log('There are no browser tests yet.')
    return
  }
  const report = join(reportDir, 'playwright.json')
  const args = ['test', '--config', 'tests/e2e/playwright.config.ts', '--reporter=list,json']
  const env = { ...process.env, PLAYWRIGHT_JSON_OUTPUT_FILE: report }
  const code = await run(...node('@playwright/test/cli.js', ...args), { env })
  countReport(code, () => {
    const { expected, unexpected, flaky, skipped } = readJson(report).stats
    return { passed: expected, failed: unexpected + flaky + skipped }
  })
}

/** A build is no check when it works, and a failure when it does not. */
async function buildClient() {
  if (!(await buildIfStale())) counts.failed += 1
}

if (!(await installIfNeeded())) process.exit(1)
if (!(await seeToChromium())) process.exit(1)

const reportDir = mkdtempSync(join(tmpdir(), 'sixteenth-test-'))
const durations = []
const steps = {
  'format, lint and types': () =>
    Promise.all([
      checkOnce(...node('prettier/bin/prettier.cjs', '--check', '--log-level', 'warn', '.')),
      checkOnce(...node('eslint/bin/eslint.js', '.', '--max-warnings', '0')),
      checkOnce(...node('vue-tsc/bin/vue-tsc.js', '--build')),
    ]),
  'unit and API': () => runVitest(reportDir),
  build: buildClient,
  browser: () => runPlaywright(reportDir),
}
for (const [name, step] of Object.entries(steps)) {
  console.log(`\n── ${name}`)
  const start = performance.now()
  await step()
  durations.push(`${name} ${((performance.now() - start) / 1000).toFixed(1)} s`)
}
rmSync(reportDir, { recursive: true, force: true })

console.log(`\n${durations.join(' · ')}`)
console.log(`${counts.passed} passed, ${counts.failed} failed`)
process.exitCode = counts.failed === 0 ? 0 : 1
