export interface TextPart {
  text: string
  /** set where the text is a link to this very application */
  href: string | null
}

/** The links of a mail that lead here; any other address stays text. */
export function findLinks(text: string, origin = location.origin): TextPart[] {
  return text
    .split(/(https?:\/\/[^\s<>"]+)/)
    .filter((part) => part !== '')
    .map((part) => ({ text: part, href: ownAddress(part, origin) }))
}

function ownAddress(text: string, origin: string): string | null {
  if (!/^https?:\/\//.test(text) || !URL.canParse(text)) return null
  const { hostname, pathname, search, hash } = new URL(text)
  const here = new URL(origin)
  // the server's own port: while developing, the page is on another one
  const isHere = hostname === here.hostname || [hostname, here.hostname].every((name) => isLoopback(name))
  return isHere ? pathname + search + hash : null
}

const isLoopback = (name: string) => name === 'localhost' || name === '127.0.0.1' || name === '[::1]'
