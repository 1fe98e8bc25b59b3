import { companyHeader } from '#shared/contracts/limits.ts'
import type { Problem } from '#shared/contracts/problems.ts'

/** What the server refused, as it said it; `offline` where nothing answered at all. */
export class ApiProblem extends Error {
  constructor(
    readonly code: Problem['code'] | 'offline',
    readonly problem: Problem | null,
  ) {
    super(problem?.detail ?? code)
    this.name = 'ApiProblem'
  }
}

/** the company that the page shows */
let company: string | null = null
let onOtherCompany: () => void = () => {}

export function askFor(companyId: string | null): void {
  company = companyId
}

/** Another window may have taken the session to another company: whoever keeps it is told. */
export function whenOtherCompany(listen: () => void): void {
  onOtherCompany = listen
}

let onSignedOut: () => void = () => {}

/** Somebody's session may end while their page is open: whoever keeps it is told. */
export function whenSignedOut(listen: () => void): void {
  onSignedOut = listen
}

async function readProblem(response: Response): Promise<ApiProblem> {
  try {
    const problem = (await response.json()) as Problem
    if (problem.code === 'not-signed-in') onSignedOut()
    if (problem.code === 'other-company') onOtherCompany()
    return new ApiProblem(problem.code, problem)
  } catch {
    return new ApiProblem('internal-error', null)
  }
}

/** Asks our own API. Throws an ApiProblem for anything but an answer. */
export async function askApi<Answer = void>(method: string, path: string, body?: unknown): Promise<Answer> {
  let response: Response
  try {
    response = await fetch(path, {
      method,
      credentials: 'same-origin',
      headers: {
        ...(company && { [companyHeader]: company }),
        ...(body !== undefined && { 'content-type': 'application/json' }),
      },
      ...(body !== undefined && { body: JSON.stringify(body) }),
    })
  } catch {
    throw new ApiProblem('offline', null)
  }
  if (!response.ok) throw await readProblem(response)
  const text = await response.text()
  return (text === '' ? undefined : JSON.parse(text)) as Answer
}
