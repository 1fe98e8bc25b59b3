import { randomUUID } from 'node:crypto'
import bcrypt from 'bcryptjs'
import { rigs } from '../../server/db/schema/index.ts'
import { makeRigBody } from '../support/fleet.ts'
import { makeCompany, makePerson } from '../support/people.ts'
import { prepareData } from '../support/preparedData.ts'

export const password = 'seventeen wet hoses'
export const listLength = 100
const rigsOfOthers = 50
const others = 1000
/** the cost that passwords have in service */
const passwordCost = 12

export interface BenchData {
  cookie: string
  email: string
  rigIds: string[]
}

/** The company that is measured, with a list of a hundred rigs, alone or among a thousand others of fifty each. */
export async function makeBenchData(dataDir: string, isCrowded: boolean): Promise<BenchData> {
  const passwordHash = await bcrypt.hash(password, passwordCost)
  return prepareData(dataDir, (data) => {
    const addRigs = (companyId: string, count: number): string[] => {
      const bodies = Array.from({ length: count }, () => makeRigBody())
      const at = new Date().toISOString()
      const rows = bodies.map(({ hoods, ...body }) => ({
        ...body,
        companyId,
        hoodCount: hoods.count,
        hoodFreeAirM3Min: hoods.freeAirEachM3Min,
        version: 1,
        creationHash: randomUUID(),
        createdAt: at,
        updatedAt: at,
        updatedBy: 'Pat',
      }))
      data.database.queries.insert(rigs).values(rows).run()
      return bodies.map(({ id }) => id)
    }
    const company = makeCompany(data)
    const { cookie, email } = makePerson(data, company, undefined, { passwordHash })
    const rigIds = addRigs(company.id, listLength)
    for (let count = 0; isCrowded && count < others; count += 1) {
      const other = makeCompany(data)
      makePerson(data, other, undefined, { passwordHash })
      addRigs(other.id, rigsOfOthers)
    }
    return { cookie, email, rigIds }
  })
}
