import { randomUUID } from 'node:crypto'
import { eq } from 'drizzle-orm'
import type { RigRecord } from '#shared/contracts/rigs.ts'
import { roles } from '#shared/contracts/permissions.ts'
import type { Role } from '#shared/contracts/permissions.ts'
import { companies, memberships } from '../../../server/db/schema/index.ts'
import { makeCompressorBody, makeRigBody, makeSiteBody } from '../../support/fleet.ts'
import { makeMediumBody, makeNozzleBody, makeYard, save } from '../../support/work.ts'
import { askWith, makeCompany, makePerson, makeSessionCookie } from '../../support/people.ts'
import type { TestCompany, TestPerson } from '../../support/people.ts'
import { startServer } from '../../support/server.ts'
import type { RunningServer } from '../../support/server.ts'

export const oldPassword = 'seventeen wet hoses'
/** in the name of everything of ours: no answer to a stranger may hold it */
export const oursMark = 'Ours'

/** Each role alone, all of them, somebody let go, somebody with every role of another company, and nobody. */
export const callers = [...roles, 'all', 'let-go', 'stranger', 'nobody'] as const
export type Caller = (typeof callers)[number]
type SignedInCaller = Exclude<Caller, 'nobody'>

const rolesOfCaller = (caller: SignedInCaller): readonly Role[] =>
  caller === 'all' || caller === 'let-go' || caller === 'stranger' ? roles : [caller]

const makers = {
  rig: makeRigBody,
  compressor: makeCompressorBody,
  site: makeSiteBody,
  nozzle: makeNozzleBody,
  medium: makeMediumBody,
}
export type Noun = keyof typeof makers
export const pluralOf = (noun: Noun) => (noun === 'medium' ? 'media' : `${noun}s`)

export const onePixel = new Uint8Array(
  Buffer.from(
    'iVBORw0KGgoAAAANSUhEUgAAAAEAAAABCAIAAACQd1PeAAAADElEQVR4nGPYYqMBAALAARlH/1QeAAAAAElFTkSuQmCC',
    'base64',
  ),
)

/** Two companies, their people, and fresh things of ours to try one's hand at. */
export class AccessWorld {
  private constructor(
    readonly server: RunningServer,
    readonly ours: TestCompany,
    private readonly theirs: TestCompany,
    private readonly people: Record<SignedInCaller, TestPerson>,
    /** makes what is tried; nobody tries anything as this one */
    private readonly keeper: TestPerson,
    readonly bystanderEmail: string,
  ) {}

  static async make(): Promise<AccessWorld> {
    const server = await startServer()
    const passwordHash = await server.context.passwords.hash(oldPassword)
    const ours = makeCompany(server, { name: `${oursMark} and only ours` })
    const theirs = makeCompany(server, { name: 'Theirs' })
    const make = (company: TestCompany, held: readonly Role[]) =>
      makePerson(server, company, held, { passwordHash })
    const people = {} as Record<SignedInCaller, TestPerson>
    for (const caller of callers) {
      if (caller === 'nobody') continue
      people[caller] = make(caller === 'stranger' ? theirs : ours, rolesOfCaller(caller))
    }
    server.database.queries
      .update(memberships)
      .set({ state: 'deactivated' })
      .where(eq(memberships.id, people['let-go'].membershipId))
      .run()
    const bystander = make(makeCompany(server), roles)
    return new AccessWorld(server, ours, theirs, people, make(ours, roles), bystander.email)
  }

  /** With a session of its own, since some of what is asked ends it. */
  askAs(caller: Caller): TestPerson['ask'] {
    return askWith(this.server.address, caller === 'nobody' ? undefined : this.makeCookie(caller))
  }

  /** The same, of a body that is no JSON. */
  sendAs(caller: Caller, { type, content }: { type: string; content: Uint8Array<ArrayBuffer> }) {
    const cookie = caller === 'nobody' ? undefined : this.makeCookie(caller)
    return (method: string, path: string): Promise<Response> =>
      fetch(this.server.address + path, {
        method,
        headers: { 'content-type': type, ...(cookie && { cookie }) },
        body: content,
      })
  }

  makeCookie(caller: SignedInCaller): string {
    const { accountId, company } = this.people[caller]
    return makeSessionCookie(this.server, accountId, company.id)
  }

  versionOfCompany(caller: Caller): number {
    const { id } = caller === 'stranger' ? this.theirs : this.ours
    const row = this.server.database.queries.select().from(companies).where(eq(companies.id, id)).get()
    return row?.version ?? 0
  }

  /** A record of ours as the API answers it, perhaps archived or deleted. */
  async makeRecord(noun: Noun, before?: string): Promise<RigRecord> {
    const { ask } = this.keeper
    const path = `/api/v1/${pluralOf(noun)}`
    const body = makers[noun]({ name: `${oursMark} ${randomUUID()}` })
    const made = await this.expectOk(await ask('POST', path, body))
    const record = (await made.json()) as RigRecord
    if (before === 'delete') {
      await this.expectOk(await ask('DELETE', `${path}/${record.id}?version=${record.version}`))
      return { ...record, version: this.versionOf(noun, record.id) }
    }
    if (before === undefined) return record
    const moved = await ask('POST', `${path}/${record.id}/${before}`, { version: record.version })
    return (await (await this.expectOk(moved)).json()) as RigRecord
  }

  /** A membership of ours, for an admin to change. */
  makeColleague(): string {
    return makePerson(this.server, this.ours, ['blaster'], { name: oursMark }).membershipId
  }

  /** A rig, a nozzle and all else that work is written down of: ours, or of the other company for one of theirs. */
  async makeYard(caller: Caller) {
    const owner = caller === 'stranger' ? { ask: this.askAs(caller) } : this.keeper
    const yard = await makeYard(owner)
    return { ...yard, save: (path: string, body: object) => save<{ id: string }>(owner, path, body) }
  }

  /** A photo of ours: 1 px, as any drawing program writes one. */
  async makePhoto(): Promise<string> {
    const id = randomUUID()
    const { cookie } = this.keeper
    const headers = { cookie, 'content-type': 'image/png' }
    const path = `${this.server.address}/api/v1/photos?id=${id}`
    await this.expectOk(await fetch(path, { method: 'POST', headers, body: onePixel }))
    return id
  }

  async makeInvitation(): Promise<string> {
    const id = randomUUID()
    const body = {
      id,
      email: `${oursMark.toLowerCase()}-${id}@example.test`,
      roles: ['blaster'],
      language: 'en',
    }
    await this.expectOk(await this.keeper.ask('POST', '/api/v1/people/invitations', body))
    return id
  }

  /** How many rows were ever written through the server's connection. */
  countWrites(): number {
    return this.server.database.connection.prepare('select total_changes()').pluck().get() as number
  }

  private versionOf(noun: Noun, id: string): number {
    return this.server.database.connection
      .prepare(`select version from ${pluralOf(noun)} where id = ?`)
      .pluck()
      .get(id) as number
  }

  private async expectOk(response: Response): Promise<Response> {
    if (!response.ok)
      throw new Error(`The world could not be made: ${response.status} ${await response.text()}`)
    return response
  }
}
