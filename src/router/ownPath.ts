/** A place of ours: a path that begins with one slash, without what an address parser would read over. */
const isPath = (text: string) => /^\/(?![/\\])[^\\\p{Cc}\p{Z}]*$/u.test(text)

/**
 * Where to go on after signing in: only to a page of our own, since the address may come from anybody. Null for
 * everything else.
 */
export function ownPath(asked: unknown, origin = location.origin): string | null {
  if (typeof asked !== 'string' || !isPath(asked)) return null
  let place: URL
  try {
    place = new URL(asked, origin)
  } catch {
    return null
  }
  // `/.//elsewhere` is `//elsewhere` once its dots are worked out
  const path = place.pathname + place.search + place.hash
  return place.origin === origin && isPath(path) ? path : null
}
