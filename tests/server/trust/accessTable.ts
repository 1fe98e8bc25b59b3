import { randomUUID } from 'node:crypto'
import type { RigRecord } from '#shared/contracts/rigs.ts'
import type { Role } from '#shared/contracts/permissions.ts'
import { makeCheckRequest } from '../../support/checkRequest.ts'
import { changeOf, makeCompressorBody, makeRigBody, makeSiteBody } from '../../support/fleet.ts'
import {
  makeBoreCheckBody,
  makeEventBody,
  makeGaugeReadingBody,
  makeMediumBody,
  makeNozzleBody,
  makeShiftBody,
} from '../../support/work.ts'
import type { AccessWorld, Caller, Noun } from './accessWorld.ts'
import { oldPassword, onePixel, pluralOf } from './accessWorld.ts'

export interface Asked {
  path: string
  body?: unknown
  /** a body that is no JSON, with its content type */
  file?: { type: string; content: Uint8Array<ArrayBuffer> }
}

/**
 * One route of the application. Written from what DESIGN.md says of the roles and from the list of addresses that
 * was agreed on, never from the routes: what the server does is compared with it.
 */
export interface AccessRow {
  route: string
  /** whoever comes; whoever is signed in; or whoever has one of these roles in the company that is active */
  may: 'anyone' | 'signed-in' | readonly Role[]
  /** what it answers to whoever may */
  status: number
  /** it is about one record of our company: to people of another one there is none */
  isOurs?: boolean
  ask: (world: AccessWorld, caller: Caller) => Asked | Promise<Asked>
}

/* DESIGN.md, section 6, line by line. */
const seesRigs: Role[] = ['blaster', 'estimator', 'owner', 'admin']
const picksToday: Role[] = ['blaster', 'estimator', 'owner', 'admin']
const logsWork: Role[] = ['blaster', 'estimator', 'owner', 'admin']
const setsCalibrationAside: Role[] = ['owner']
const addsSites: Role[] = ['blaster', 'estimator', 'owner']
const writesFleet: Role[] = ['owner']
const managesPeople: Role[] = ['admin']
const exportsData: Role[] = ['owner', 'admin']

const at =
  (path: string, makeBody?: (world: AccessWorld, caller: Caller) => unknown): AccessRow['ask'] =>
  (world, caller) => ({ path, ...(makeBody && { body: makeBody(world, caller) }) })

const anotherAddress = () => `new-${randomUUID()}@example.test`
const companyInput = { name: 'Another one', currency: 'USD', language: 'en', timeZone: 'America/Denver' }
const newPassword = 'gravel under a tarp'
const noToken = { token: 'nobody-was-ever-given-this-one' }

const bodyMakers = {
  rig: makeRigBody,
  compressor: makeCompressorBody,
  site: makeSiteBody,
  nozzle: makeNozzleBody,
  medium: makeMediumBody,
}

/** A record as a change sends it back, under another name. */
function renamed(noun: Noun, record: RigRecord) {
  const name = `Ours, changed ${randomUUID()}`
  if (noun !== 'nozzle') return changeOf(record, { name })
  const { photoId: _photoId, name: _name, ...change } = changeOf(record) as Record<string, unknown>
  return { ...change, tag: name.slice(0, 30) }
}

/** What crews write down, each of a yard of the caller’s own company. */
const workRows: AccessRow[] = [
  { route: 'GET /api/v1/work', may: seesRigs, status: 200, ask: at('/api/v1/work') },
  { route: 'GET /api/v1/shifts', may: seesRigs, status: 200, ask: at('/api/v1/shifts') },
  {
    route: 'POST /api/v1/nozzles/unknown',
    may: logsWork,
    status: 201,
    ask: at('/api/v1/nozzles/unknown', () => ({
      id: randomUUID(),
      shape: 'venturi',
      boxRigId: null,
      photoId: null,
    })),
  },
  {
    route: 'POST /api/v1/nozzle-events',
    may: logsWork,
    status: 201,
    ask: async (world, caller) => ({
      path: '/api/v1/nozzle-events',
      body: makeEventBody({ nozzleId: (await world.makeYard(caller)).nozzleId }),
    }),
  },
  {
    route: 'POST /api/v1/shifts',
    may: logsWork,
    status: 201,
    ask: async (world, caller) => ({
      path: '/api/v1/shifts',
      body: makeShiftBody({ rigId: (await world.makeYard(caller)).rigId }),
    }),
  },
  {
    route: 'POST /api/v1/bore-checks',
    may: logsWork,
    status: 201,
    ask: async (world, caller) => ({
      path: '/api/v1/bore-checks',
      body: makeBoreCheckBody({ nozzleId: (await world.makeYard(caller)).nozzleId }),
    }),
  },
  {
    route: 'POST /api/v1/gauge-readings',
    may: logsWork,
    status: 201,
    ask: async (world, caller) => {
      const { rigId, compressorId, siteId } = await world.makeYard(caller)
      return {
        path: '/api/v1/gauge-readings',
        body: makeGaugeReadingBody({ rigId, compressorId, siteId }),
      }
    },
  },
  {
    route: 'PUT /api/v1/gauge-readings/:readingId/set-aside',
    may: setsCalibrationAside,
    status: 200,
    isOurs: true,
    ask: async (world) => {
      const { rigId, compressorId, siteId, save } = await world.makeYard('owner')
      const { id } = await save('gauge-readings', makeGaugeReadingBody({ rigId, compressorId, siteId }))
      return { path: `/api/v1/gauge-readings/${id}/set-aside`, body: { isSetAside: true } }
    },
  },
  {
    route: 'POST /api/v1/photos',
    may: logsWork,
    status: 201,
    ask: () => ({
      path: `/api/v1/photos?id=${randomUUID()}`,
      file: { type: 'image/png', content: onePixel },
    }),
  },
  {
    route: 'GET /api/v1/photos/:photoId',
    may: seesRigs,
    status: 200,
    isOurs: true,
    ask: async (world) => ({ path: `/api/v1/photos/${await world.makePhoto()}` }),
  },
  {
    route: 'POST /api/v1/history/import',
    may: writesFleet,
    status: 200,
    ask: at('/api/v1/history/import', () => ({ csv: 'date\n', isPreview: true })),
  },
]

/** What can be done with one kind of record. */
function recordRows(noun: Noun, mayCreate: Role[]): AccessRow[] {
  const path = `/api/v1/${pluralOf(noun)}`
  const one = `${path}/:${noun}Id`
  const ofOurs = { isOurs: true, status: 200 }
  const move = (verb: string, before?: string): AccessRow => ({
    route: `POST ${one}/${verb}`,
    may: writesFleet,
    ...ofOurs,
    ask: async (world) => {
      const { id, version } = await world.makeRecord(noun, before)
      return { path: `${path}/${id}/${verb}`, body: { version } }
    },
  })
  return [
    { route: `GET ${path}`, may: seesRigs, status: 200, ask: at(path) },
    { route: `POST ${path}`, may: mayCreate, status: 201, ask: at(path, () => bodyMakers[noun]()) },
    {
      route: `GET ${one}`,
      may: seesRigs,
      ...ofOurs,
      ask: async (world) => ({ path: `${path}/${(await world.makeRecord(noun)).id}` }),
    },
    {
      route: `PUT ${one}`,
      may: writesFleet,
      ...ofOurs,
      ask: async (world) => {
        const record = await world.makeRecord(noun)
        return {
          path: `${path}/${record.id}`,
          body: renamed(noun, record),
        }
      },
    },
    {
      route: `DELETE ${one}`,
      may: writesFleet,
      ...ofOurs,
      status: 204,
      ask: async (world) => {
        const { id, version } = await world.makeRecord(noun)
        return { path: `${path}/${id}?version=${version}` }
      },
    },
    move('archive'),
    move('unarchive', 'archive'),
    move('restore', 'delete'),
  ]
}

export const accessTable: readonly AccessRow[] = [
  { route: 'GET /healthz', may: 'anyone', status: 200, ask: at('/healthz') },
  { route: 'GET /readyz', may: 'anyone', status: 200, ask: at('/readyz') },
  { route: 'GET /api/v1/health', may: 'anyone', status: 200, ask: at('/api/v1/health') },
  { route: 'GET /api/openapi.json', may: 'anyone', status: 200, ask: at('/api/openapi.json') },
  {
    route: 'POST /api/v1/check',
    may: 'anyone',
    status: 200,
    ask: at('/api/v1/check', () => makeCheckRequest()),
  },
  // On the own machine outside production, as the tests run; elsewhere it is not there.
  { route: 'GET /api/v1/mails', may: 'anyone', status: 200, ask: at('/api/v1/mails') },

  { route: 'GET /api/v1/visit', may: 'anyone', status: 200, ask: at('/api/v1/visit') },
  {
    route: 'POST /api/v1/sign-up',
    may: 'anyone',
    status: 202,
    ask: at('/api/v1/sign-up', () => ({
      name: 'Robin',
      email: anotherAddress(),
      password: newPassword,
      company: companyInput,
    })),
  },
  {
    route: 'POST /api/v1/session',
    may: 'anyone',
    status: 200,
    ask: at('/api/v1/session', ({ bystanderEmail }) => ({ email: bystanderEmail, password: oldPassword })),
  },
  { route: 'DELETE /api/v1/session', may: 'anyone', status: 204, ask: at('/api/v1/session') },
  // There is no demo in this database.
  {
    route: 'POST /api/v1/demo-session',
    may: 'anyone',
    status: 404,
    ask: at('/api/v1/demo-session', ({ bystanderEmail }) => ({ email: bystanderEmail })),
  },
  {
    route: 'POST /api/v1/password/forgotten',
    may: 'anyone',
    status: 202,
    ask: at('/api/v1/password/forgotten', () => ({ email: anotherAddress(), language: 'en' })),
  },
  // What opens with a token from a mail opens to nobody without one.
  ...[
    { route: 'POST /api/v1/sign-up/confirm', body: noToken },
    { route: 'POST /api/v1/password/reset', body: { ...noToken, password: newPassword } },
    { route: 'POST /api/v1/invitations/view', body: noToken },
    { route: 'POST /api/v1/invitations/accept', body: { ...noToken, name: 'Robin', password: newPassword } },
  ].map(({ route, body }): AccessRow => {
    return { route, may: 'anyone', status: 410, ask: at(route.slice('POST '.length), () => body) }
  }),

  {
    route: 'PUT /api/v1/account/password',
    may: 'signed-in',
    status: 204,
    ask: at('/api/v1/account/password', () => ({ currentPassword: oldPassword, password: newPassword })),
  },
  {
    route: 'PUT /api/v1/account',
    may: 'signed-in',
    status: 200,
    ask: at('/api/v1/account', () => ({ name: 'Robin', language: 'es' })),
  },
  {
    route: 'PUT /api/v1/session/company',
    may: 'signed-in',
    status: 200,
    isOurs: true,
    ask: at('/api/v1/session/company', ({ ours }) => ({ companyId: ours.id })),
  },
  {
    route: 'POST /api/v1/companies',
    may: 'signed-in',
    status: 201,
    ask: at('/api/v1/companies', () => ({ ...companyInput, id: randomUUID() })),
  },
  {
    route: 'PUT /api/v1/company',
    may: writesFleet,
    status: 200,
    ask: at('/api/v1/company', (world, caller) => ({
      ...companyInput,
      name: `Renamed ${randomUUID()}`,
      version: world.versionOfCompany(caller),
    })),
  },

  { route: 'GET /api/v1/people', may: managesPeople, status: 200, ask: at('/api/v1/people') },
  {
    route: 'PUT /api/v1/people/:personId',
    may: managesPeople,
    status: 200,
    isOurs: true,
    ask: (world) => ({
      path: `/api/v1/people/${world.makeColleague()}`,
      body: { version: 1, roles: ['estimator'] },
    }),
  },
  {
    route: 'POST /api/v1/people/invitations',
    may: managesPeople,
    status: 201,
    ask: at('/api/v1/people/invitations', () => ({
      id: randomUUID(),
      email: anotherAddress(),
      roles: ['blaster'],
      language: 'en',
    })),
  },
  ...['resend', 'withdraw'].map((verb): AccessRow => ({
    route: `POST /api/v1/people/invitations/:invitationId/${verb}`,
    may: managesPeople,
    status: 200,
    isOurs: true,
    ask: async (world) => ({ path: `/api/v1/people/invitations/${await world.makeInvitation()}/${verb}` }),
  })),
  { route: 'GET /api/v1/audit', may: managesPeople, status: 200, ask: at('/api/v1/audit') },
  { route: 'GET /api/v1/audit.csv', may: managesPeople, status: 200, ask: at('/api/v1/audit.csv') },

  { route: 'GET /api/v1/fleet', may: seesRigs, status: 200, ask: at('/api/v1/fleet') },
  ...recordRows('rig', writesFleet),
  ...recordRows('compressor', writesFleet),
  ...recordRows('site', addsSites),
  ...recordRows('nozzle', writesFleet),
  ...recordRows('medium', writesFleet),
  ...workRows,
  {
    route: 'PUT /api/v1/rigs/:rigId/today',
    may: picksToday,
    status: 200,
    isOurs: true,
    ask: async (world) => ({
      path: `/api/v1/rigs/${(await world.makeRecord('rig')).id}/today`,
      body: { localDate: new Date().toISOString().slice(0, 10), compressorId: null, siteId: null },
    }),
  },
  ...['rigs', 'compressors'].map((kind): AccessRow => ({
    route: `POST /api/v1/${kind}/import`,
    may: writesFleet,
    status: 200,
    ask: at(`/api/v1/${kind}/import`, () => ({ csv: 'name\n', isPreview: true })),
  })),
  { route: 'GET /api/v1/export.zip', may: exportsData, status: 200, ask: at('/api/v1/export.zip') },
]
