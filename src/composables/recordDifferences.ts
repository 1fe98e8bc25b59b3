/**
 * What two people made of the same record, field by field. A field is what a person sees as one: a hose with its length
 * and couplings, a nozzle's new bore with its number.
 */
type Plain = null | boolean | number | string | Plain[] | { [key: string]: Plain }
type PlainRecord = { [key: string]: Plain }

export type Side = 'mine' | 'theirs'

export interface FieldDifference {
  /** where it stands: `outlets.0.nozzle.boreNowMm` */
  path: string
  mine: unknown
  theirs: unknown
  /** whose change it is: of two, somebody has to choose */
  changedBy: Side | 'both'
}

/** Parts that go together or not at all. */
const wholeParts = new Set(['airLine', 'hose', 'whip', 'pot', 'hoods', 'curve'])
/** A part of another field, which it follows. */
const followers: Record<string, string> = { numberSixteenths: 'newBoreMm' }

/** Whatever order the fields were written in. */
function isSame(one: unknown, other: unknown): boolean {
  if (typeof one !== 'object' || typeof other !== 'object' || one === null || other === null)
    return one === other
  const [keys, otherKeys] = [Object.keys(one), Object.keys(other)]
  return (
    keys.length === otherKeys.length &&
    keys.every((key) => isSame((one as PlainRecord)[key], (other as PlainRecord)[key]))
  )
}

function isBranch(key: string, mine: Plain | undefined, theirs: Plain | undefined): boolean {
  if (wholeParts.has(key)) return false
  if (Array.isArray(mine) && Array.isArray(theirs)) return mine.length === theirs.length
  const isRecord = (value: Plain | undefined) =>
    typeof value === 'object' && value !== null && !Array.isArray(value)
  return isRecord(mine) && isRecord(theirs)
}

function partOf(whole: Plain | undefined, key: string): Plain | undefined {
  return typeof whole === 'object' && whole !== null ? (whole as PlainRecord)[key] : undefined
}

function compare(
  base: Plain | undefined,
  mine: Plain | undefined,
  theirs: Plain | undefined,
  path: string[],
): FieldDifference[] {
  if (isSame(mine, theirs)) return []
  if (isBranch(path.at(-1) ?? '', mine, theirs)) {
    return Object.keys(mine as PlainRecord)
      .filter((key) => !(key in followers))
      .flatMap((key) => compare(partOf(base, key), partOf(mine, key), partOf(theirs, key), [...path, key]))
  }
  const changedBy = isSame(base, mine) ? 'theirs' : isSame(base, theirs) ? 'mine' : 'both'
  return [{ path: path.join('.'), mine, theirs, changedBy }]
}

/**
 * Inputs   what the record was when one began · what one made of it · how it stands now; the profile's fields of each
 * Result   the fields that differ between the last two, in the record's order
 */
export function findDifferences(base: object, mine: object, theirs: object): FieldDifference[] {
  return compare(base as PlainRecord, mine as PlainRecord, theirs as PlainRecord, [])
}

/** Their record with the fields that are to be as mine. */
export function mergeRecords<Profile extends object>(
  mine: Profile,
  theirs: Profile,
  choices: Record<string, Side>,
): Profile {
  const merged = structuredClone(theirs) as PlainRecord
  for (const [path, side] of Object.entries(choices)) {
    if (side === 'theirs') continue
    const keys = path.split('.')
    const last = keys.pop()!
    let from: Plain = mine as unknown as PlainRecord
    let to: Plain = merged
    for (const key of keys) {
      from = (from as PlainRecord)[key]!
      to = (to as PlainRecord)[key]!
    }
    const follower = Object.entries(followers).find(([, leader]) => leader === last)?.[0]
    for (const key of follower === undefined ? [last] : [last, follower]) {
      ;(to as PlainRecord)[key] = structuredClone((from as PlainRecord)[key]!)
    }
  }
  return merged as unknown as Profile
}
