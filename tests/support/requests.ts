import { expect } from 'vitest'
import { problemSchema } from '#shared/contracts/problems.ts'
import type { Problem } from '#shared/contracts/problems.ts'

export function postText(address: string, text: string, contentType = 'application/json'): Promise<Response> {
  return fetch(`${address}/api/v1/check`, {
    method: 'POST',
    headers: { 'content-type': contentType },
    body: text,
  })
}

export function postCheck(address: string, body: unknown): Promise<Response> {
  return postText(address, JSON.stringify(body))
}

/** A refusal in the contract's shape, that shows nothing of the inside. */
export async function readProblem(response: Response): Promise<Problem> {
  expect(response.headers.get('content-type')).toMatch(/^application\/problem\+json/)
  const text = await response.text()
  expect(text).not.toMatch(/node_modules|\.ts\b|\bat [\w.]+ \(/)
  const problem = problemSchema.parse(JSON.parse(text))
  expect(problem.status).toBe(response.status)
  for (const error of problem.errors ?? []) expect(error.message).toMatch(/^\S.*\.$/)
  return problem
}

export function listErrors(problem: Problem): string[] {
  return (problem.errors ?? []).map(({ code, path }) => `${code} ${path}`)
}
