import { join } from 'node:path'
import BetterSqlite from 'better-sqlite3'
import { changeOf, makeRigBody, makeSiteBody } from './fleet.ts'
import { askWith, makeCompany, makePerson } from './people.ts'
import { prepareData } from './preparedData.ts'
import { startServerProcess } from './serverProcess.ts'
import type { ServerProcess } from './serverProcess.ts'

/** What one client was told, record by record. */
interface Told {
  table: 'sites' | 'rigs'
  id: string
  body: { id: string; name: string }
  /** the last version that was acknowledged; null: none was, so that it may be there or not */
  version: number | null
  /** the name that belongs to that version */
  name: string
  /** the name of a change that was sent and not answered */
  sentName: string | null
}

interface Client {
  cookie: string
  companyId: string
  told: Told[]
}

export interface Outcome {
  acknowledged: number
  /** sent again after the restart, since no answer came */
  repeated: number
  complaints: string[]
}

const clientCount = 8
export const fewestAcknowledged = 10

function makeClients(dataDir: string, rounds: number): Promise<Client[][]> {
  return prepareData(dataDir, (data) =>
    Array.from({ length: rounds }, () =>
      Array.from({ length: clientCount }, () => {
        const company = makeCompany(data)
        return { cookie: makePerson(data, company).cookie, companyId: company.id, told: [] }
      }),
    ),
  )
}

/** Creates and changes records one after the other until the server is gone. */
async function write(client: Client, address: string, isTold: () => void): Promise<void> {
  const ask = askWith(address, client.cookie)
  try {
    for (let count = 0; count < 900; count += 1) {
      const table = count % 2 === 0 ? 'sites' : 'rigs'
      const body = table === 'sites' ? makeSiteBody() : makeRigBody()
      const told: Told = { table, id: body.id, body, version: null, name: body.name, sentName: null }
      client.told.push(told)
      const made = await ask('POST', `/api/v1/${table}`, body)
      if (made.status !== 201) throw new Error(`POST ${table} was answered with ${made.status}`)
      const record = (await made.json()) as { id: string; version: number }
      told.version = record.version
      isTold()

      told.sentName = `${body.name} changed`
      const change = { ...changeOf(record), name: told.sentName }
      const changed = await ask('PUT', `/api/v1/${table}/${body.id}`, change)
      if (changed.status !== 200) throw new Error(`PUT ${table} was answered with ${changed.status}`)
      const after = (await changed.json()) as { version: number }
      Object.assign(told, { version: after.version, name: told.sentName, sentName: null })
    }
  } catch (error) {
    // undici speaks of a connection that broke in a TypeError: that is the kill, and nothing was acknowledged.
    if (!(error instanceof TypeError)) throw error
  }
}

interface Row {
  version: number
  name: string
}

/** What the file says against what was told to the clients. */
function compare(connection: BetterSqlite.Database, clients: readonly Client[]): string[] {
  const complaints: string[] = []
  const integrity: unknown = connection.pragma('integrity_check', { simple: true })
  if (integrity !== 'ok') complaints.push(`integrity_check: ${String(integrity)}`)
  const broken = connection.pragma('foreign_key_check') as unknown[]
  if (broken.length > 0) complaints.push(`foreign_key_check: ${broken.length} references lead nowhere`)

  const find = {
    sites: connection.prepare('select version, name from sites where company_id = ? and id = ?'),
    rigs: connection.prepare('select version, name from rigs where company_id = ? and id = ?'),
  }
  const audited = connection
    .prepare(
      `select count(*) as entries, sum(action like '%.created') as created
       from audit_entries where company_id = ? and subject_id = ?`,
    )
    .raw()
  for (const { companyId, told } of clients) {
    for (const { table, id, version, name, sentName } of told) {
      const rows = find[table].all(companyId, id) as Row[]
      const [entries, created] = audited.get(companyId, id) as [number, number | null]
      const [row] = rows
      const say = (words: string) => complaints.push(`${table} ${id}: ${words}`)
      if (rows.length > 1) say('is there twice')
      if (row === undefined) {
        if (version !== null) say('was acknowledged and is not there')
        if (entries > 0) say('is in the audit and not there')
        continue
      }
      if (entries !== row.version || created !== 1)
        say(`has ${entries} audit entries at version ${row.version}`)
      if (version === null) continue
      const isLast = row.version === version && row.name === name
      const isSent = row.version === version + 1 && row.name === sentName
      if (!isLast && !isSent) say(`is ${row.name} at version ${row.version}, told was ${name} at ${version}`)
    }
    const count = (table: string) =>
      connection
        .prepare(`select count(*) from ${table} where company_id = ?`)
        .pluck()
        .get(companyId) as number
    if (count('sites') + count('rigs') > told.length)
      complaints.push(`${companyId}: more records than were sent`)
  }
  return complaints
}

/** What was not answered is sent again, as every client does; then it is there once, whether it had been or not. */
async function repeatUnanswered(clients: readonly Client[], address: string): Promise<number> {
  let repeated = 0
  for (const { cookie, told } of clients) {
    for (const record of told.filter(({ version }) => version === null)) {
      const answer = await askWith(address, cookie)('POST', `/api/v1/${record.table}`, record.body)
      if (!answer.ok) throw new Error(`the repeated POST was answered with ${answer.status}`)
      record.version = ((await answer.json()) as { version: number }).version
      repeated += 1
    }
  }
  return repeated
}

function compareFile(dataDir: string, clients: readonly Client[]): string[] {
  const connection = new BetterSqlite(join(dataDir, 'sixteenth.sqlite'))
  try {
    return compare(connection, clients)
  } finally {
    connection.close()
  }
}

/** Lets the clients write, and kills the server a little after so many answers. */
async function writeUntilKilled(
  clients: readonly Client[],
  server: ServerProcess,
  random: () => number,
): Promise<number> {
  const killAfter = fewestAcknowledged + Math.floor(random() * 40)
  let acknowledged = 0
  const writing = clients.map((client) =>
    write(client, server.address, () => {
      acknowledged += 1
      if (acknowledged === killAfter) setTimeout(() => server.kill('SIGKILL'), random() * 20)
    }),
  )
  await Promise.all(writing)
  await server.ended
  return acknowledged
}

/** Eight clients write, the server is killed under them, and the next one finds all that was acknowledged. */
export async function torture(dataDir: string, rounds: number, random: () => number): Promise<Outcome> {
  const clients = await makeClients(dataDir, rounds)
  const outcome: Outcome = { acknowledged: 0, repeated: 0, complaints: [] }
  let server = await startServerProcess(dataDir)
  for (const [index, ofRound] of clients.entries()) {
    outcome.acknowledged += await writeUntilKilled(ofRound, server, random)
    server = await startServerProcess(dataDir)
    const complaints = compareFile(dataDir, ofRound)
    outcome.repeated += await repeatUnanswered(ofRound, server.address)
    complaints.push(...compareFile(dataDir, ofRound))
    outcome.complaints.push(...complaints.map((complaint) => `round ${index + 1}: ${complaint}`))
  }
  server.kill('SIGKILL')
  await server.ended
  outcome.complaints.push(...compareFile(dataDir, clients.flat()))
  return outcome
}
