/* How quickly the API answers, beside a floor that does nothing but answer. It prints figures and judges nothing. */
import { spawn } from 'node:child_process'
import { once } from 'node:events'
import { cpSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { availableParallelism, tmpdir } from 'node:os'
import { join } from 'node:path'
import { makeBenchData } from './apiData.ts'
import type { BenchData } from './apiData.ts'
import { load, loads, readAnswers } from './apiLoad.ts'
import type { LoadName, Target } from './apiLoad.ts'
import { quantile } from './statistics.ts'

const seconds = Number(process.env['SECONDS_EACH'] ?? 6)
const warmUpSeconds = 2
const writesPerSecond = 20
const projectRoot = join(import.meta.dirname, '../..')

/** One of the two servers in a process of its own. */
async function startProcess(script: string, dataDir: string, environment: Record<string, string> = {}) {
  const child = spawn(process.execPath, ['--import', 'tsx', script], {
    cwd: projectRoot,
    stdio: ['ignore', 'pipe', 'inherit'],
    env: {
      ...process.env,
      NODE_ENV: 'test',
      HOST: '127.0.0.1',
      PORT: '0',
      DATA_DIR: dataDir,
      CHECK_RATE_PER_MINUTE: 'off',
      ...environment,
    },
  })
  const ended = once(child, 'exit')
  const address = await new Promise<string>((resolve, reject) => {
    child.stdout.on('data', (text: Buffer) => {
      const found = /http:\/\/[\w.:]+/.exec(text.toString())
      if (found) resolve(found[0])
    })
    void ended.then(() => reject(new Error(`${script} stopped before it listened.`)))
  })
  return {
    address,
    async stop() {
      child.kill('SIGTERM')
      await ended
    },
  }
}

const whole = (value: number) => Math.round(value).toLocaleString('en')
const milliseconds = (value: number) => `${value.toFixed(0)} ms`
const percent = (share: number) => `${(share * 100).toFixed(0)} %`

function printRow(...cells: string[]): void {
  const [name = '', ...others] = cells
  console.log(name.padEnd(34) + others.map((cell) => cell.padStart(14)).join(''))
}

const turns = 3

/** Ours and the floor by turns, the median of each, so that what else the machine does falls on both. */
async function measurePeaks(ours: Target, floor: Target) {
  const peaks = {} as Record<LoadName, { ours: number; floor: number }>
  for (const name of loads) {
    for (const target of [ours, floor]) await load(name, target, warmUpSeconds)
    const rates = { ours: [] as number[], floor: [] as number[] }
    for (let turn = 0; turn < turns; turn += 1) {
      rates.ours.push((await load(name, ours, seconds / turns)).perSecond)
      rates.floor.push((await load(name, floor, seconds / turns)).perSecond)
    }
    peaks[name] = { ours: quantile(rates.ours, 0.5), floor: quantile(rates.floor, 0.5) }
  }
  return peaks
}

async function measureCompanies(title: string, dataDir: string, data: BenchData) {
  console.log(`\n${title}`)
  const server = await startProcess('server/index.ts', dataDir)
  const ours = { address: server.address, data }
  const answers = await readAnswers(ours)
  const answersFile = `${dataDir}-answers.json`
  writeFileSync(answersFile, JSON.stringify(answers))
  const floorDir = `${dataDir}-floor`
  cpSync(dataDir, floorDir, { recursive: true })
  const floorProcess = await startProcess('tests/bench/apiFloor.ts', floorDir, { FLOOR_ANSWERS: answersFile })
  const floor = { address: floorProcess.address, data }
  try {
    const list = JSON.stringify(answers.find(({ path }) => path === '/api/v1/rigs')?.answer ?? '')
    console.log(`The list is ${whole(Buffer.byteLength(list))} bytes.`)
    const peaks = await measurePeaks(ours, floor)
    printRow('', 'a second', 'floor', 'of the floor', 'p99, half peak', 'p99, writing')
    for (const name of loads) {
      const peak = peaks[name]
      const half = Math.max(1, Math.round(peak.ours / 2))
      const calm = await load(name, ours, seconds, { rate: half })
      const [busy] = await Promise.all([
        load(name, ours, seconds, { rate: half }),
        load('write', ours, seconds, { rate: writesPerSecond, connections: 4, firstRig: 50 }),
        load('sign-in', ours, seconds, { rate: 1, connections: 1 }),
      ])
      const share = peak.ours / peak.floor
      const columns = [whole(peak.ours), whole(peak.floor), percent(share)]
      printRow(name, ...columns, milliseconds(calm.p99Ms), milliseconds(busy.p99Ms))
    }
    return peaks
  } finally {
    await server.stop()
    await floorProcess.stop()
    for (const path of [answersFile, floorDir]) rmSync(path, { recursive: true, force: true })
  }
}

const folder = mkdtempSync(join(tmpdir(), 'sixteenth-bench-'))
try {
  console.log(
    `Node ${process.version}, ${availableParallelism()} cores shared with the client; ${seconds} s each.`,
  )
  const oneDir = join(folder, 'one')
  const one = await measureCompanies('One company', oneDir, await makeBenchData(oneDir, false))
  const manyDir = join(folder, 'many')
  const many = await measureCompanies(
    'Among 1,000 companies of 50 rigs',
    manyDir,
    await makeBenchData(manyDir, true),
  )
  console.log('\nTimes as slow with 1,000 companies, measured against the floor of its own run:')
  for (const name of loads) {
    const share = (peaks: typeof one) => peaks[name].ours / peaks[name].floor
    const plain = one[name].ours / many[name].ours
    printRow(name, `${plain.toFixed(2)} plain`, `${(share(one) / share(many)).toFixed(2)} by floor`)
  }
} finally {
  rmSync(folder, { recursive: true, force: true })
}
