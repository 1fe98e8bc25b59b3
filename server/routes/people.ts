import { z } from 'zod'
import { peopleSchema, personChangeSchema, personSchema } from '#shared/contracts/people.ts'
import { idSchema } from '#shared/contracts/records.ts'
import { defineRoute } from '../routing/route.ts'
import { listInvitations } from '../services/invitations.ts'
import { changePerson, listPeople } from '../services/people.ts'

export const peopleRoutes = [
  defineRoute({
    method: 'get',
    path: '/api/v1/people',
    access: 'manage-people',
    operationId: 'listPeople',
    summary: 'The people of the company, and who is invited',
    answer: peopleSchema,
    handle: ({ context: { database, now }, caller: { companyId } }) => ({
      people: listPeople(database.queries, companyId),
      invitations: listInvitations(database.queries, companyId, now()),
    }),
  }),
  defineRoute({
    method: 'put',
    path: '/api/v1/people/:personId',
    access: 'manage-people',
    operationId: 'changePerson',
    summary: 'Change the roles of a person, let them go or take them back',
    params: z.strictObject({ personId: idSchema }),
    body: personChangeSchema,
    answer: personSchema,
    problems: ['version-conflict', 'last-admin', 'last-owner'],
    handle: ({ context, caller, params, body }) => changePerson(context, caller, params.personId, body),
  }),
]
