import express from 'express'
import type { RequestHandler } from 'express'
import { makeProblem } from '../problems.ts'

export const maxBodyBytes = 100_000
export const maxBodyDepth = 20

/** Walks with a list of its own, so that no body can exhaust the stack. */
function isDeeperThan(limit: number, body: unknown): boolean {
  let level = [body]
  for (let depth = 0; level.length > 0; depth += 1) {
    const inner = level.filter((value) => typeof value === 'object' && value !== null)
    if (inner.length > 0 && depth >= limit) return true
    level = inner.flatMap((value) => Object.values(value as object))
  }
  return false
}

const refuseOtherTypes: RequestHandler = (request, _response, next) => {
  const type = request.headers['content-type'] ?? ''
  if (/^application\/json\s*(;|$)/i.test(type.trim())) return next()
  next(makeProblem('wrong-content-type', 'The body must be JSON, sent as application/json.'))
}

const emptyBody = () => makeProblem('bad-json', 'The body is empty; it must be JSON.')

const refuseAbsent: RequestHandler = (request, _response, next) => {
  next(request.body === undefined ? emptyBody() : undefined)
}

/** Express would read a body without content as an empty object. */
function refuseEmpty(_request: unknown, _response: unknown, content: Buffer): void {
  if (content.length === 0) throw emptyBody()
}

const refuseDeep: RequestHandler = (request, _response, next) => {
  if (!isDeeperThan(maxBodyDepth, request.body)) return next()
  next(makeProblem('body-too-deep', `The body nests deeper than ${maxBodyDepth} levels.`))
}

/** Reads a JSON body of a sensible size and depth; what is in it is the contract's business. */
export function jsonBody(limit = maxBodyBytes): RequestHandler[] {
  return [
    refuseOtherTypes,
    express.json({ limit, strict: false, type: () => true, verify: refuseEmpty }),
    refuseAbsent,
    refuseDeep,
  ]
}
