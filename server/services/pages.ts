import { recordLimits } from '#shared/contracts/limits.ts'
import { makeFieldProblem } from '../problems.ts'

export interface PageQuery {
  cursor?: string | undefined
  limit?: number | undefined
}

export interface Page<Item> {
  items: Item[]
  nextCursor: string | null
}

/** What a page is ordered by. */
export interface Line {
  id: string
  name: string
}

/** Where the page before ended: nobody's business but ours, so it is not to be read. */
export function encodeCursor({ name, id }: Line): string {
  return Buffer.from(JSON.stringify([name, id])).toString('base64url')
}

export function decodeCursor(cursor: string): Line {
  try {
    const parts: unknown = JSON.parse(Buffer.from(cursor, 'base64url').toString('utf8'))
    if (Array.isArray(parts) && parts.length === 2) {
      const [name, id] = parts as unknown[]
      if (typeof name === 'string' && typeof id === 'string') return { name, id }
    }
  } catch {
    // not one of ours
  }
  throw makeFieldProblem('/cursor', 'invalid', 'The cursor is not one that a page ended with.')
}

/** One page by name; it asks for one line more than it shows, to know whether there is another page. */
export function readPage<Item extends Line>(
  { cursor, limit = recordLimits.pageSize }: PageQuery,
  find: (limit: number, after: Line | null) => Item[],
): Page<Item> {
  const found = find(limit + 1, cursor === undefined ? null : decodeCursor(cursor))
  const items = found.slice(0, limit)
  const last = items.at(-1)
  return { items, nextCursor: found.length > limit && last ? encodeCursor(last) : null }
}
