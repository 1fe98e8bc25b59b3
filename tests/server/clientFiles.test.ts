import { mkdirSync, rmSync, writeFileSync } from 'node:fs'
import { get } from 'node:http'
import type { IncomingMessage } from 'node:http'
import { join } from 'node:path'
import { brotliCompressSync, brotliDecompressSync, gzipSync } from 'node:zlib'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { makeDataDir, startServer } from '../support/server.ts'
import type { RunningServer } from '../support/server.ts'

const page =
  '<!doctype html><title>built page</title><script>document.title</script><script src="/a.js"></script>'
const script = 'export const figure = 1\n'.repeat(100)
const scriptPath = '/assets/index-1a2b3c4d.js'

let clientDir: string
let server: RunningServer
beforeAll(async () => {
  clientDir = makeDataDir()
  mkdirSync(join(clientDir, 'assets'))
  writeFileSync(join(clientDir, 'index.html'), page)
  writeFileSync(join(clientDir, 'robots.txt'), 'User-agent: *\n')
  writeFileSync(join(clientDir, '.stamp'), 'secret')
  writeFileSync(join(clientDir, scriptPath), script)
  writeFileSync(join(clientDir, `${scriptPath}.br`), brotliCompressSync(script))
  writeFileSync(join(clientDir, `${scriptPath}.gz`), gzipSync(script))
  server = await startServer({ clientDir })
})
afterAll(async () => {
  await server.stop()
  rmSync(clientDir, { recursive: true, force: true })
})

/** Without the decompression that fetch does by itself. */
async function getRaw(path: string, headers: Record<string, string> = {}) {
  const response = await new Promise<IncomingMessage>((resolve, reject) => {
    get(server.address + path, { headers }, resolve).once('error', reject)
  })
  const chunks: Buffer[] = []
  for await (const chunk of response) chunks.push(chunk as Buffer)
  return { status: response.statusCode, headers: response.headers, body: Buffer.concat(chunks) }
}

describe('the built client', () => {
  it('keeps hashed files for ever and asks again for the page', async () => {
    expect((await getRaw(scriptPath)).headers['cache-control']).toBe('public, max-age=31536000, immutable')
    expect((await getRaw('/')).headers['cache-control']).toBe('no-cache')
    expect((await getRaw('/robots.txt')).headers['cache-control']).toBe('no-cache')
  })

  it('sends what the build compressed, brotli before gzip', async () => {
    const both = await getRaw(scriptPath, { 'accept-encoding': 'gzip, deflate, br' })
    expect(both.headers).toMatchObject({ 'content-encoding': 'br', vary: 'Accept-Encoding' })
    expect(both.headers['content-type']).toMatch(/javascript/)
    expect(brotliDecompressSync(both.body).toString()).toBe(script)
    expect((await getRaw(scriptPath, { 'accept-encoding': 'gzip' })).headers['content-encoding']).toBe('gzip')
  })

  it('sends the plain file to who takes nothing else', async () => {
    const plain = await getRaw(scriptPath)
    expect(plain.headers['content-encoding']).toBeUndefined()
    expect(plain.body.toString()).toBe(script)
  })

  it('says not modified to who has it already', async () => {
    const { etag } = (await getRaw('/')).headers
    expect(etag).toBeDefined()
    expect((await getRaw('/', { 'if-none-match': etag ?? '' })).status).toBe(304)
    expect((await getRaw('/', { 'if-none-match': '"other"' })).status).toBe(200)
  })

  it.each(['/', '/check', '/rigs/3f0c/page'])(
    'answers %s with the page, since the client routes it',
    async (path) => {
      const { status, headers, body } = await getRaw(path)
      expect(status).toBe(200)
      expect(headers['content-type']).toMatch(/^text\/html/)
      expect(body.toString()).toBe(page)
    },
  )

  it.each([
    '/.stamp',
    '/assets/../../package.json',
    '/..%2fpackage.json',
    '/assets/none.js',
    `${scriptPath}.br`,
  ])('has no %s', async (path) => {
    expect((await getRaw(path)).status).toBe(404)
  })

  it('lets the page run the inline script it was built with, and no other', async () => {
    const policy = String((await getRaw('/')).headers['content-security-policy'])
    // printf 'document.title' | openssl dgst -sha256 -binary | base64
    expect(policy).toContain("script-src 'self' 'sha256-o3vzFSF4YhB5rDb5tpELAmIlJDq+2XOarY4IDsOum1c='")
    expect(policy.match(/sha256-/g)).toHaveLength(1)
  })
})
