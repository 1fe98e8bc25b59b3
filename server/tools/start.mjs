import { spawn } from 'node:child_process'
import { buildIfStale, installIfNeeded, projectRoot } from './prepare.mjs'

if (!(await installIfNeeded())) {
  console.error('The installation failed; what npm said stands above.')
  process.exit(1)
}
if (!(await buildIfStale())) {
  console.error('The client could not be built; the reason stands above.')
  process.exit(1)
}

const server = spawn(process.execPath, ['--import', 'tsx', 'server/index.ts'], {
  cwd: projectRoot,
  stdio: 'inherit',
})
for (const signal of ['SIGTERM', 'SIGINT']) process.on(signal, () => server.kill(signal))
server.once('exit', (code) => process.exit(code ?? 0))
