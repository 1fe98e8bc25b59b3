import { compareText, sortMade } from './instants.ts'

interface Made {
  id: string
  at: string
}

/** The same record twice is one. Where two copies differ, the same one is kept whatever order they came in. */
export function dropRepeats<T extends { id: string }>(records: readonly T[]): T[] {
  const kept = new Map<string, T>()
  for (const record of records) {
    const other = kept.get(record.id)
    if (!other || compareText(JSON.stringify(record), JSON.stringify(other)) < 0) kept.set(record.id, record)
  }
  return [...kept.values()]
}

export interface Corrected<T> {
  /** what counts */
  current: T
  /** what was written first of it */
  first: T
}

/**
 * What counts of records that may be corrections of each other.
 *
 * A correction and all that it corrects, directly or by way of others, are one thing; of it the correction that nobody
 * corrected counts. Of two people's corrections of one record the later counts, by instant, then by id; so it does where
 * records correct each other in a ring, or where what they correct has not arrived.
 *
 * Inputs   records in any order, repeats among them
 * Result   in order of what was written first, by instant, then by id
 * Errors   none        Checked  tests/shared/work/supersede.test.ts
 */
export function dropSuperseded<T extends Made & { supersedesId: string | null }>(
  records: readonly T[],
): Corrected<T>[] {
  const all = sortMade(dropRepeats(records))
  const parents = new Map<string, string>()
  const rootOf = (id: string): string => {
    let root = id
    for (let next = parents.get(root); next !== undefined; next = parents.get(root)) root = next
    for (let at = id; at !== root;) {
      const next = parents.get(at)!
      parents.set(at, root)
      at = next
    }
    return root
  }
  for (const { id, supersedesId } of all) {
    if (supersedesId === null) continue
    const a = rootOf(id)
    const b = rootOf(supersedesId)
    if (a !== b) parents.set(a, b)
  }
  const superseded = new Set(
    all.flatMap(({ id, supersedesId }) => (supersedesId === id ? [] : [supersedesId])),
  )
  const groups = new Map<string, T[]>()
  for (const record of all) {
    const root = rootOf(record.id)
    const group = groups.get(root)
    if (group) group.push(record)
    else groups.set(root, [record])
  }
  return [...groups.values()].map((group) => ({
    current: group.findLast(({ id }) => !superseded.has(id)) ?? group.at(-1)!,
    first: group[0]!,
  }))
}
