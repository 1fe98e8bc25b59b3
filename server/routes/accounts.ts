import { z } from 'zod'
import {
  changePasswordSchema,
  chooseCompanySchema,
  forgottenPasswordSchema,
  profileInputSchema,
  resetPasswordSchema,
  sessionSchema,
  signInSchema,
  signUpSchema,
  tokenOnlySchema,
  visitSchema,
} from '#shared/contracts/accounts.ts'
import { emailSchema } from '#shared/contracts/records.ts'
import { clearSessionCookie } from '../middleware/clearSessionCookie.ts'
import { defineRoute } from '../routing/route.ts'
import { changeProfile, readSession } from '../services/accounts.ts'
import { enterCompany } from '../services/companies.ts'
import { askForReset, changePassword, resetPassword } from '../services/passwordResets.ts'
import { setActiveCompany, signIn, signOut } from '../services/signIn.ts'
import { confirmSignUp, signUp } from '../services/signUp.ts'
import { openDemoSession, readVisit } from '../services/visit.ts'

const addressSchema = z.strictObject({ email: z.string() })
const passing = ['too-many-requests', 'busy'] as const

export const accountRoutes = [
  defineRoute({
    method: 'get',
    path: '/api/v1/visit',
    access: 'visitor',
    operationId: 'readVisit',
    summary: 'Who is signed in, if anybody, and what this installation offers',
    answer: visitSchema,
    handle: ({ context, caller }) => readVisit(context, caller),
  }),
  defineRoute({
    method: 'post',
    path: '/api/v1/sign-up',
    access: 'visitor',
    operationId: 'signUp',
    summary: 'Begins an account and a company; a mail asks to confirm the address',
    body: signUpSchema,
    status: 202,
    problems: passing,
    handle: ({ context, request, body }) => signUp(context, request.ip, body),
  }),
  defineRoute({
    method: 'post',
    path: '/api/v1/sign-up/confirm',
    access: 'visitor',
    operationId: 'confirmSignUp',
    summary: 'Makes the account and the company of a sign-up whose mail was read',
    body: tokenOnlySchema,
    answer: addressSchema,
    problems: ['link-not-good'],
    handle: ({ context, body }) => confirmSignUp(context, body.token),
  }),
  defineRoute({
    method: 'post',
    path: '/api/v1/session',
    access: 'visitor',
    operationId: 'signIn',
    summary: 'Signs somebody in with their password',
    body: signInSchema,
    answer: sessionSchema,
    problems: ['wrong-credentials', ...passing],
    handle: ({ context, request, body }) => signIn(context, request, body),
  }),
  defineRoute({
    method: 'delete',
    path: '/api/v1/session',
    access: 'visitor',
    operationId: 'signOut',
    summary: 'Signs out whoever is signed in',
    status: 204,
    handle: async ({ context, caller, request, response }) => {
      await signOut(context, request, caller)
      clearSessionCookie(context, response)
    },
  }),
  defineRoute({
    method: 'post',
    path: '/api/v1/demo-session',
    access: 'visitor',
    operationId: 'openDemoSession',
    summary: 'Signs in as one of the demo, on the own machine only',
    body: z.strictObject({ email: emailSchema }),
    answer: sessionSchema,
    problems: ['not-found'],
    handle: ({ context, request, body }) => openDemoSession(context, request, body.email),
  }),
  defineRoute({
    method: 'post',
    path: '/api/v1/password/forgotten',
    access: 'visitor',
    operationId: 'askForReset',
    summary: 'Sends a mail with a link to a new password',
    body: forgottenPasswordSchema,
    status: 202,
    problems: ['too-many-requests'],
    handle: ({ context, request, body }) => askForReset(context, request.ip, body),
  }),
  defineRoute({
    method: 'post',
    path: '/api/v1/password/reset',
    access: 'visitor',
    operationId: 'resetPassword',
    summary: 'Puts a new password in place of a forgotten one',
    body: resetPasswordSchema,
    answer: addressSchema,
    problems: ['link-not-good', 'busy'],
    handle: ({ context, body }) => resetPassword(context, body),
  }),
  defineRoute({
    method: 'put',
    path: '/api/v1/account/password',
    access: 'signed-in',
    operationId: 'changePassword',
    summary: 'Changes the own password; other devices are signed out',
    body: changePasswordSchema,
    status: 204,
    problems: passing,
    handle: ({ context, caller, request, body }) => changePassword(context, request, caller.accountId, body),
  }),
  defineRoute({
    method: 'put',
    path: '/api/v1/account',
    access: 'signed-in',
    operationId: 'changeProfile',
    summary: 'Changes the own name and language',
    body: profileInputSchema,
    answer: sessionSchema,
    handle: ({ context, caller, body }) => {
      changeProfile(context, caller, body)
      return readSession(context, caller.accountId, 'companyId' in caller ? caller.companyId : null)
    },
  }),
  defineRoute({
    method: 'put',
    path: '/api/v1/session/company',
    access: 'signed-in',
    operationId: 'enterCompany',
    summary: 'Makes another of the own companies the active one',
    body: chooseCompanySchema,
    answer: sessionSchema,
    problems: ['not-found'],
    handle: async ({ context, caller, request, body }) => {
      enterCompany(context, caller.accountId, body.companyId)
      await setActiveCompany(request, body.companyId)
      return readSession(context, caller.accountId, body.companyId)
    },
  }),
]
