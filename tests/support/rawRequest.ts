import { request } from 'node:http'
import { brotliDecompressSync, gunzipSync } from 'node:zlib'

export interface RawAnswer {
  status: number
  headers: Record<string, string | string[] | undefined>
  text: string
}

function unpack(content: Buffer, encoding: string | undefined): Buffer {
  if (encoding === 'br') return brotliDecompressSync(content)
  return encoding === 'gzip' ? gunzipSync(content) : content
}

/** A request as anybody may form it: any header, any body, and an end to the patience. */
export function sendRaw(
  address: string,
  method: string,
  path: string,
  { headers = {}, body, timeoutMs = 10_000 }: RawOptions = {},
): Promise<RawAnswer> {
  const { hostname, port } = new URL(address)
  // Else Node sends the body of a GET or DELETE as if it were the next request.
  const framed =
    body === undefined ? headers : { 'content-length': String(Buffer.byteLength(body)), ...headers }
  return new Promise((resolve, reject) => {
    const sent = request(
      { hostname, port, method, path, headers: framed, timeout: timeoutMs, agent: false },
      (response) => {
        const chunks: Buffer[] = []
        response.on('data', (chunk: Buffer) => chunks.push(chunk))
        response.on('error', reject)
        response.on('end', () => {
          const text = unpack(Buffer.concat(chunks), response.headers['content-encoding']).toString('utf8')
          resolve({ status: response.statusCode ?? 0, headers: response.headers, text })
        })
      },
    )
    sent.on('timeout', () => sent.destroy(new Error(`${method} ${path} had no answer in ${timeoutMs} ms`)))
    sent.on('error', reject)
    sent.end(body)
  })
}

export interface RawOptions {
  headers?: Record<string, string>
  body?: string | Buffer
  timeoutMs?: number
}
