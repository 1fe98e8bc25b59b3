import express from 'express'
import type { Request, RequestHandler, Response } from 'express'
import multer, { memoryStorage, MulterError } from 'multer'
import { workLimits } from '#shared/contracts/limits.ts'
import { makePassingProblem, makeProblem } from '../problems.ts'

export const photoTypes = ['image/jpeg', 'image/png', 'image/webp'] as const
const { photoBytes } = workLimits

/** so many bodies may be on their way at once: each is held in memory until it is written */
const mostUnderway = 12
let underway = 0

const readRaw = express.raw({ limit: photoBytes, type: [...photoTypes], inflate: false })
const readForm = multer({
  storage: memoryStorage(),
  limits: { fileSize: photoBytes, files: 1, fields: 0, parts: 2, headerPairs: 20 },
}).single('file')

export function makeTooLarge() {
  return makeProblem('body-too-large', `A photo may have at most ${photoBytes / 1_000_000} MB.`)
}

function translate(error: unknown): unknown {
  if (error instanceof MulterError) {
    if (error.code === 'LIMIT_FILE_SIZE') return makeTooLarge()
    return makeProblem('bad-request', 'The form must hold one photo, as its part “file”, and nothing else.')
  }
  const { status } = error as { status?: unknown }
  if (status === 413) return makeTooLarge()
  if (status === undefined && error instanceof Error && /multipart|form/i.test(error.message)) {
    return makeProblem('bad-request', 'The form could not be read.')
  }
  return error
}

function run(handler: RequestHandler, request: Request, response: Response): Promise<void> {
  return new Promise((resolve, reject) => {
    void handler(request, response, (error?: unknown) => (error ? reject(translate(error)) : resolve()))
  })
}

/** Reads a photo, as it is or as the one part of a form, into memory; what it really is nobody has looked at yet. */
export const readPhoto: RequestHandler = async (request, response, next) => {
  const [type = ''] = (request.get('content-type') ?? '').toLowerCase().split(';')
  const isForm = type.trim() === 'multipart/form-data'
  if (!isForm && !photoTypes.some((known) => known === type.trim())) {
    throw makeProblem('wrong-content-type', 'A photo must be a JPEG, PNG or WebP picture.')
  }
  if (underway >= mostUnderway) {
    throw makePassingProblem('busy', 'Too many photos are arriving at once. Try again in a moment.', 5)
  }
  underway += 1
  response.once('close', () => (underway -= 1))
  await run(isForm ? readForm : readRaw, request, response)
  const content: unknown = isForm ? request.file?.buffer : request.body
  if (!Buffer.isBuffer(content) || content.length === 0) {
    throw makeProblem('bad-request', 'The request holds no photo.')
  }
  request.body = content
  next()
}
