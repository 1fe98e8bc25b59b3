import { answerCheck } from '#shared/check/answerCheck.ts'
import { checkAnswerSchema, checkRequestSchema } from '#shared/contracts/check.ts'
import { checkRateLimit } from '../middleware/checkRateLimit.ts'
import { defineRoute } from '../routing/route.ts'

export const checkRoutes = [
  defineRoute({
    method: 'post',
    path: '/api/v1/check',
    access: 'anyone',
    operationId: 'check',
    summary: 'Whether a rig at a site holds a nozzle pressure; nothing is stored',
    body: checkRequestSchema,
    answer: checkAnswerSchema,
    problems: ['too-many-requests'],
    middleware: ({ config }) => [checkRateLimit(config.checkRatePerMinute)],
    handle: ({ body }) => answerCheck(body),
  }),
]
