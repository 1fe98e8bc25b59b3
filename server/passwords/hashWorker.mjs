import { parentPort } from 'node:worker_threads'
import bcrypt from 'bcryptjs'

function work({ kind, password, cost, hash }) {
  return kind === 'hash' ? bcrypt.hashSync(password, cost) : bcrypt.compareSync(password, hash)
}

parentPort.on('message', (job) => {
  try {
    parentPort.postMessage({ result: work(job) })
  } catch (error) {
    parentPort.postMessage({ error: error instanceof Error ? error.message : 'The password was not hashed.' })
  }
})
