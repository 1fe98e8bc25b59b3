import {
  companyChangeSchema,
  companySchema,
  newCompanySchema,
  sessionSchema,
} from '#shared/contracts/accounts.ts'
import { defineRoute } from '../routing/route.ts'
import { readSession } from '../services/accounts.ts'
import { changeCompany, createCompany } from '../services/companies.ts'
import { setActiveCompany } from '../services/signIn.ts'

export const companyRoutes = [
  defineRoute({
    method: 'post',
    path: '/api/v1/companies',
    access: 'signed-in',
    operationId: 'createCompany',
    summary: 'Makes one more company, which becomes the active one',
    body: newCompanySchema,
    status: 201,
    answer: sessionSchema,
    problems: ['id-in-use', 'too-many-records'],
    handle: async ({ context, caller, request, body }) => {
      createCompany(context, caller.accountId, body)
      await setActiveCompany(request, body.id)
      return readSession(context, caller.accountId, body.id)
    },
  }),
  defineRoute({
    method: 'put',
    path: '/api/v1/company',
    access: 'write-fleet',
    operationId: 'changeCompany',
    summary: 'Changes the active company',
    body: companyChangeSchema,
    answer: companySchema,
    problems: ['version-conflict'],
    handle: ({ context, caller, body }) => changeCompany(context, caller, body),
  }),
]
