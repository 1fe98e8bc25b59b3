import { availableParallelism } from 'node:os'
import { Worker } from 'node:worker_threads'
import { recordLimits } from '#shared/contracts/limits.ts'
import { makePassingProblem } from '../problems.ts'

export interface PasswordHasher {
  hash(password: string): Promise<string>
  /** Null is the hash of nobody: it costs as much time as any other, and nothing matches it. */
  verify(password: string, hash: string | null): Promise<boolean>
  close(): Promise<void>
}

type Job =
  { kind: 'hash'; password: string; cost: number } | { kind: 'verify'; password: string; hash: string }
type Reply = { result: string | boolean } | { error: string }

interface Waiting {
  job: Job
  resolve: (result: string | boolean) => void
  reject: (error: Error) => void
}

/** Two at most: the rest of the machine is for those who are already in. */
const mostWorkers = 2
const mostWaiting = 64
const retryAfterS = 3
const workerFile = new URL('../passwords/hashWorker.mjs', import.meta.url)

/** Threads that hash passwords one after another, started when first needed, and a queue with an end. */
class HashingPool {
  private readonly idle: Worker[] = []
  private readonly busy = new Map<Worker, Waiting>()
  private readonly queue: Waiting[] = []

  constructor(private readonly size: number) {}

  run(job: Job): Promise<string | boolean> {
    if (this.queue.length >= mostWaiting) {
      const detail = 'Too many people are signing in at this moment. Try again shortly.'
      return Promise.reject(makePassingProblem('busy', detail, retryAfterS))
    }
    return new Promise((resolve, reject) => {
      this.queue.push({ job, resolve, reject })
      this.next()
    })
  }

  async close(): Promise<void> {
    const workers = [...this.idle, ...this.busy.keys()]
    for (const { reject } of this.queue.splice(0)) reject(new Error('The server is stopping.'))
    await Promise.all(workers.map((worker) => worker.terminate()))
  }

  private next(): void {
    if (this.queue.length === 0) return
    const worker = this.idle.pop() ?? (this.busy.size < this.size ? this.start() : undefined)
    const waiting = worker && this.queue.shift()
    if (!worker || !waiting) return
    this.busy.set(worker, waiting)
    worker.postMessage(waiting.job)
  }

  private start(): Worker {
    // The worker is plain JavaScript: it needs none of the loaders the server may run with.
    const worker = new Worker(workerFile, { execArgv: [] })
    let failure: Error | undefined
    worker.on('message', (reply: Reply) => {
      const waiting = this.busy.get(worker)
      this.busy.delete(worker)
      this.idle.push(worker)
      if ('result' in reply) waiting?.resolve(reply.result)
      else waiting?.reject(new Error(reply.error))
      this.next()
    })
    worker.on('error', (error) => (failure = error))
    worker.on('exit', () => {
      const index = this.idle.indexOf(worker)
      if (index >= 0) this.idle.splice(index, 1)
      this.busy.get(worker)?.reject(failure ?? new Error('The thread that hashes passwords has ended.'))
      this.busy.delete(worker)
      this.next()
    })
    worker.unref()
    return worker
  }
}

const isTooLong = (password: string) => Buffer.byteLength(password) > recordLimits.passwordMostBytes

/** Well formed, of the cost that every other has, and the hash of nothing that is known. */
function hashOfNobody(cost: number): string {
  return `$2b$${String(cost).padStart(2, '0')}$${'Sixteenth'.repeat(6).slice(0, 53)}`
}

/** bcrypt at the given cost, off the thread that answers requests. */
export function createPasswordHasher(
  cost: number,
  threads = Math.max(1, Math.min(mostWorkers, availableParallelism() - 1)),
): PasswordHasher {
  const pool = new HashingPool(threads)
  return {
    async hash(password) {
      if (isTooLong(password)) throw new RangeError('bcrypt would read only a part of this password.')
      return String(await pool.run({ kind: 'hash', password, cost }))
    },
    async verify(password, hash) {
      // Cut to what bcrypt reads, a longer password would pass for the one it begins with.
      const isNobody = hash === null || isTooLong(password)
      const job = { kind: 'verify', password, hash: isNobody ? hashOfNobody(cost) : hash } as const
      return (await pool.run(job)) === true && !isNobody
    },
    close: () => pool.close(),
  }
}
