/* The client reloads through Vite, the server restarts through tsx; one command starts and stops both. */
import { spawn } from 'node:child_process'
import { installIfNeeded, projectRoot } from './prepare.mjs'

if (!(await installIfNeeded())) process.exit(1)

const children = [
  [
    'node_modules/tsx/dist/cli.mjs',
    'watch',
    '--clear-screen=false',
    '--include',
    'migrations/**',
    'server/index.ts',
  ],
  ['node_modules/vite/bin/vite.js'],
].map((args) => spawn(process.execPath, args, { cwd: projectRoot, stdio: 'inherit' }))

let isStopping = false
function stopAll(code) {
  if (isStopping) return
  isStopping = true
  process.exitCode = code
  for (const child of children) child.kill('SIGTERM')
}
for (const signal of ['SIGTERM', 'SIGINT']) process.on(signal, () => stopAll(0))
for (const child of children) child.once('exit', (code) => stopAll(code ?? 0))
