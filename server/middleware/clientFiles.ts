import type { RequestHandler } from 'express'
import type { BuiltClient, BuiltFile } from '../builtClient.ts'
import { makeProblem } from '../problems.ts'

const encodings = ['br', 'gzip'] as const
const immutable = 'public, max-age=31536000, immutable'

function sendFile(file: BuiltFile, ...[request, response]: Parameters<RequestHandler>): void {
  const encoding = encodings.find((name) => file.encoded[name] && request.acceptsEncodings(name) === name)
  response.set('Cache-Control', file.isHashed ? immutable : 'no-cache')
  response.vary('Accept-Encoding')
  response.set('ETag', `"${file.digest}${encoding ? `-${encoding}` : ''}"`)
  response.type(file.extension)
  if (encoding) response.set('Content-Encoding', encoding)
  response.send((encoding && file.encoded[encoding]) ?? file.content)
}

/** The built client, and its page for every address that is the client's own to route. */
export function clientFiles(client: BuiltClient): RequestHandler {
  return (request, response, next) => {
    if (request.method !== 'GET' && request.method !== 'HEAD') {
      return next(makeProblem('not-found', 'There is nothing at this address.'))
    }
    const isPage = !/\.[^/]*$/.test(request.path)
    const file = client.files.get(isPage ? '/index.html' : request.path)
    if (!file) return next(makeProblem('not-found', 'There is nothing at this address.'))
    sendFile(file, request, response, next)
  }
}
