/* A test of npm test at its full length: node server/tools/longTest.mjs torture */
import { installIfNeeded, projectRoot, run } from './prepare.mjs'
import { join } from 'node:path'

const tests = {
  torture: { TORTURE_ROUNDS: '50', TORTURE_SEED: String(Date.now() % 1_000_000) },
  fuzz: { FUZZ_PER_ROUTE: '1000', FUZZ_SEED: String(Date.now() % 1_000_000) },
}

const [name] = process.argv.slice(2)
const length = tests[name]
if (!length) {
  console.error(`Say which: ${Object.keys(tests).join(' or ')}.`)
  process.exit(1)
}
if (!(await installIfNeeded())) process.exit(1)
const env = { ...length, ...process.env }
console.log(
  Object.entries(length)
    .map(([key]) => `${key}=${env[key]}`)
    .join(' '),
)
const vitest = join(projectRoot, 'node_modules/vitest/vitest.mjs')
const file = `tests/server/trust/${name}.test.ts`
process.exitCode = await run(process.execPath, [vitest, 'run', '--project', 'node', file], { env })
