import { z } from 'zod'
import {
  acceptInvitationSchema,
  invitationViewSchema,
  sessionSchema,
  tokenOnlySchema,
} from '#shared/contracts/accounts.ts'
import { invitationInputSchema, invitationSchema } from '#shared/contracts/people.ts'
import { idSchema } from '#shared/contracts/records.ts'
import { defineRoute } from '../routing/route.ts'
import { acceptInvitation, viewInvitation } from '../services/acceptInvitation.ts'
import { readSession } from '../services/accounts.ts'
import { createInvitation, resendInvitation, withdrawInvitation } from '../services/invitations.ts'
import { startSession } from '../services/signIn.ts'

const params = z.strictObject({ invitationId: idSchema })

export const invitationRoutes = [
  defineRoute({
    method: 'post',
    path: '/api/v1/invitations/view',
    access: 'visitor',
    operationId: 'viewInvitation',
    summary: 'What the invitation behind a link says',
    body: tokenOnlySchema,
    answer: invitationViewSchema,
    problems: ['link-not-good'],
    handle: ({ context, body }) => viewInvitation(context, body.token),
  }),
  defineRoute({
    method: 'post',
    path: '/api/v1/invitations/accept',
    access: 'visitor',
    operationId: 'acceptInvitation',
    summary: 'Join the company: as the account of the address, or with a new one',
    body: acceptInvitationSchema,
    answer: sessionSchema,
    problems: ['link-not-good', 'not-signed-in', 'busy'],
    handle: async ({ context, caller, body, request }) => {
      const { accountId, companyId } = await acceptInvitation(context, caller, body)
      await startSession(request, accountId, companyId)
      return readSession(context, accountId, companyId)
    },
  }),
  defineRoute({
    method: 'post',
    path: '/api/v1/people/invitations',
    access: 'manage-people',
    operationId: 'createInvitation',
    summary: 'Invite an address to the company',
    body: invitationInputSchema,
    status: 201,
    answer: invitationSchema,
    problems: ['id-in-use', 'too-many-requests'],
    handle: ({ context, caller, body }) => createInvitation(context, caller, body),
  }),
  defineRoute({
    method: 'post',
    path: '/api/v1/people/invitations/:invitationId/resend',
    access: 'manage-people',
    operationId: 'resendInvitation',
    summary: 'Send an invitation again with a new link, for seven more days',
    params,
    answer: invitationSchema,
    problems: ['version-conflict', 'invalid-fields', 'too-many-requests'],
    handle: ({ context, caller, params }) => resendInvitation(context, caller, params.invitationId),
  }),
  defineRoute({
    method: 'post',
    path: '/api/v1/people/invitations/:invitationId/withdraw',
    access: 'manage-people',
    operationId: 'withdrawInvitation',
    summary: 'Withdraw an invitation: its link is dead',
    params,
    answer: invitationSchema,
    problems: ['version-conflict'],
    handle: ({ context, caller, params }) => withdrawInvitation(context, caller, params.invitationId),
  }),
]
