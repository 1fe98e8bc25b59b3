import type { AddressInfo } from 'node:net'
import { SMTPServer } from 'smtp-server'
import type { SMTPServerOptions } from 'smtp-server'

export interface ReceivedMail {
  from: string
  to: string
  /** names in small letters, values unfolded and decoded */
  headers: Record<string, string>
  text: string
  html: string
}

export interface MailServer {
  port: number
  url: string
  received: ReceivedMail[]
  /** how many programs have connected */
  connections(): number
  stop(): Promise<void>
}

function decodeQuotedPrintable(text: string): Buffer {
  const bytes = text
    .replace(/=\r\n/g, '')
    .replace(/=([0-9A-F]{2})/g, (_, hex: string) => String.fromCharCode(parseInt(hex, 16)))
  return Buffer.from(bytes, 'latin1')
}

function decodeBody(body: string, encoding = '7bit'): string {
  if (encoding === 'base64') return Buffer.from(body, 'base64').toString('utf8')
  if (encoding === 'quoted-printable') return decodeQuotedPrintable(body).toString('utf8')
  return Buffer.from(body, 'latin1').toString('utf8')
}

/** RFC 2047: words of a header that are not ASCII. */
function decodeHeader(value: string): string {
  return value
    .replace(/\?=\s+=\?/g, '?==?')
    .replace(/=\?utf-8\?([QB])\?([^?]*)\?=/gi, (_, kind: string, text: string) =>
      kind.toUpperCase() === 'B'
        ? Buffer.from(text, 'base64').toString('utf8')
        : decodeQuotedPrintable(text.replaceAll('_', ' ')).toString('utf8'),
    )
}

function readPart(raw: string): { headers: Record<string, string>; body: string } {
  const end = raw.indexOf('\r\n\r\n')
  const headers = raw
    .slice(0, end)
    .replace(/\r\n[ \t]+/g, ' ')
    .split('\r\n')
    .map((line): [string, string] => {
      const colon = line.indexOf(':')
      return [line.slice(0, colon).toLowerCase(), decodeHeader(line.slice(colon + 1).trim())]
    })
  return { headers: Object.fromEntries(headers), body: raw.slice(end + 4) }
}

/** A message of one text and one HTML part, as it came over the wire. */
export function readMessage(raw: string): Pick<ReceivedMail, 'headers' | 'text' | 'html'> {
  const { headers, body } = readPart(raw)
  const boundary = /^multipart\/alternative;.*boundary="([^"]+)"/.exec(headers['content-type'] ?? '')?.[1]
  if (boundary === undefined) throw new Error(`Not text and HTML: ${headers['content-type'] ?? ''}`)
  const parts = body
    .split(`--${boundary}`)
    .slice(1, -1)
    .map((part) => readPart(part.replace(/^\r\n/, '').replace(/\r\n$/, '')))
  const decoded = (type: string) => {
    const part = parts.find((each) => each.headers['content-type']?.startsWith(type))
    return part ? decodeBody(part.body, part.headers['content-transfer-encoding']) : ''
  }
  return { headers, text: decoded('text/plain'), html: decoded('text/html') }
}

/** A real mail server on the own machine, that takes any mail unless told otherwise. */
export async function startMailServer(options: SMTPServerOptions = {}, port = 0): Promise<MailServer> {
  const received: ReceivedMail[] = []
  let connections = 0
  const server = new SMTPServer({
    authOptional: true,
    disabledCommands: ['STARTTLS'],
    disableReverseLookup: true,
    logger: false,
    onConnect: (_session, done) => {
      connections += 1
      done()
    },
    onData: (stream, session, done) => {
      const chunks: Buffer[] = []
      stream.on('data', (chunk: Buffer) => chunks.push(chunk))
      stream.on('end', () => {
        const { mailFrom, rcptTo } = session.envelope
        received.push({
          from: mailFrom ? mailFrom.address : '',
          to: rcptTo.map(({ address }) => address).join(', '),
          ...readMessage(Buffer.concat(chunks).toString('latin1')),
        })
        done()
      })
    },
    ...options,
  })
  // A program that hangs up half-way is what some tests are about.
  server.on('error', () => {})
  await new Promise<void>((resolve) => server.listen(port, '127.0.0.1', resolve))
  const bound = (server.server.address() as AddressInfo).port
  return {
    port: bound,
    url: `smtp://127.0.0.1:${bound}`,
    received,
    connections: () => connections,
    stop: () => new Promise((resolve) => server.close(resolve)),
  }
}
