/* What a fresh clone needs before anything else can run: plain Node, since nothing is installed yet. */
import { spawn } from 'node:child_process'
import { createHash } from 'node:crypto'
import { existsSync, mkdirSync, readdirSync, readFileSync, statSync, writeFileSync } from 'node:fs'
import { dirname, join } from 'node:path'
import { fileURLToPath } from 'node:url'

export const projectRoot = fileURLToPath(new URL('../..', import.meta.url))

const lockFile = join(projectRoot, 'package-lock.json')
const lockStamp = join(projectRoot, 'node_modules/.sixteenth/lock')
const nodeStamp = join(projectRoot, 'node_modules/.sixteenth/node')
const buildStamp = join(projectRoot, 'dist/.stamp')
const clientSources = ['src', 'shared', 'index.html', 'vite.config.ts', 'package.json', 'package-lock.json']

/** Runs one program to its end and answers its exit code. */
export function run(command, args, options = {}) {
  return new Promise((resolve, reject) => {
    const child = spawn(command, args, { cwd: projectRoot, stdio: 'inherit', ...options })
    child.once('error', reject)
    child.once('exit', (code, signal) => resolve(signal ? 1 : (code ?? 1)))
  })
}

function listFiles(path) {
  if (!existsSync(path)) return []
  if (statSync(path).isFile()) return [path]
  return readdirSync(path)
    .sort()
    .flatMap((name) => listFiles(join(path, name)))
}

function hashFiles(paths) {
  const hash = createHash('sha256')
  for (const path of paths)
    hash.update(path.slice(projectRoot.length)).update('\0').update(readFileSync(path))
  return hash.digest('hex')
}

function hasStamp(stamp, value) {
  return existsSync(stamp) && readFileSync(stamp, 'utf8') === value
}

function writeStamp(stamp, value) {
  mkdirSync(dirname(stamp), { recursive: true })
  writeFileSync(stamp, value)
}

/** npm notes beside what it installed what that was: a package added by hand needs no second installation. */
function isInstalledAsLocked() {
  const installedLock = join(projectRoot, 'node_modules/.package-lock.json')
  if (!existsSync(installedLock)) return false
  const wanted = JSON.parse(readFileSync(lockFile, 'utf8')).packages
  const installed = JSON.parse(readFileSync(installedLock, 'utf8')).packages
  return Object.entries(wanted).every(
    ([path, entry]) =>
      path === '' || entry.optional || entry.devOptional || installed[path]?.version === entry.version,
  )
}

/** The compiled database driver fits one version of the Node modules interface only. */
function isInstalledForThisNode() {
  if (!existsSync(join(projectRoot, 'node_modules/better-sqlite3/build/Release/better_sqlite3.node')))
    return false
  return !existsSync(nodeStamp) || readFileSync(nodeStamp, 'utf8') === process.versions.modules
}

/** Answers whether what is installed is what the lock file and this Node ask for. */
export async function installIfNeeded() {
  const lock = hashFiles([lockFile])
  if (hasStamp(lockStamp, lock) && hasStamp(nodeStamp, process.versions.modules)) return true
  if (!isInstalledAsLocked() || !isInstalledForThisNode()) {
    console.log('Installing what the lock file names. The first time takes some minutes.')
    const npm = process.platform === 'win32' ? 'npm.cmd' : 'npm'
    const code = await run(npm, ['ci', '--no-audit', '--no-fund', '--include=dev'])
    if (code !== 0) return false
  }
  writeStamp(lockStamp, lock)
  writeStamp(nodeStamp, process.versions.modules)
  return true
}

/** Builds the client unless the built one is of these very sources. */
export async function buildIfStale() {
  const stamp = hashFiles(clientSources.flatMap((name) => listFiles(join(projectRoot, name))))
  if (hasStamp(buildStamp, stamp)) return true
  console.log('Building the client.')
  const vite = join(projectRoot, 'node_modules/vite/bin/vite.js')
  const environment = { ...process.env, NODE_ENV: 'production' }
  const code = await run(process.execPath, [vite, 'build', '--logLevel', 'warn'], { env: environment })
  if (code !== 0) return false
  writeStamp(buildStamp, stamp)
  return true
}
