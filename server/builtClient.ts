import { createHash } from 'node:crypto'
import { existsSync, readdirSync, readFileSync } from 'node:fs'
import { extname, join, relative, sep } from 'node:path'

export interface BuiltFile {
  content: Buffer
  /** made by the build beside the file */
  encoded: { br?: Buffer; gzip?: Buffer }
  digest: string
  extension: string
  /** its name changes with its content, so that it may be kept for ever */
  isHashed: boolean
}

export interface BuiltClient {
  /** by the path it is asked for, such as /assets/index-1a2b3c4d.js */
  files: Map<string, BuiltFile>
  inlineScriptHashes: string[]
}

function hashInlineScripts(page: string): string[] {
  const scripts = page.matchAll(/<script(?![^>]*\ssrc=)[^>]*>([\s\S]*?)<\/script>/g)
  return [...scripts].map(([, body = '']) => `sha256-${createHash('sha256').update(body).digest('base64')}`)
}

function readIfThere(path: string): Buffer | undefined {
  return existsSync(path) ? readFileSync(path) : undefined
}

/** The built client is a few hundred kilobytes: it is read once and served from memory. */
export function readBuiltClient(clientDir: string): BuiltClient {
  const files = new Map<string, BuiltFile>()
  const entries = existsSync(clientDir)
    ? readdirSync(clientDir, { recursive: true, withFileTypes: true })
    : []
  for (const entry of entries) {
    if (!entry.isFile() || entry.name.startsWith('.') || /\.(br|gz)$/.test(entry.name)) continue
    const path = join(entry.parentPath, entry.name)
    const content = readFileSync(path)
    const br = readIfThere(`${path}.br`)
    const gzip = readIfThere(`${path}.gz`)
    const url = `/${relative(clientDir, path).split(sep).join('/')}`
    files.set(url, {
      content,
      encoded: { ...(br && { br }), ...(gzip && { gzip }) },
      digest: createHash('sha256').update(content).digest('base64url').slice(0, 22),
      extension: extname(entry.name) || 'application/octet-stream',
      isHashed: url.startsWith('/assets/'),
    })
  }
  const page = files.get('/index.html')
  return { files, inlineScriptHashes: page ? hashInlineScripts(page.content.toString('utf8')) : [] }
}
