import type { Express } from 'express'

interface Layer {
  /** the address it was given to app.use with */
  rawPath?: string
  route?: { path: string; methods: Record<string, boolean> }
  handle: { stack?: Layer[] }
}

function walk(stack: readonly Layer[], prefix: string): string[] {
  return stack.flatMap(({ rawPath = '/', route, handle }) => {
    if (route) {
      return Object.keys(route.methods)
        .filter((method) => method !== '_all')
        .map((method) => `${method.toUpperCase()} ${prefix}${route.path}`)
    }
    return handle.stack ? walk(handle.stack, rawPath === '/' ? prefix : prefix + rawPath) : []
  })
}

/** Each method and address that the application itself says it answers, in whatever router it hangs. */
export function listMountedRoutes(app: Express): string[] {
  return walk((app.router as unknown as { stack: Layer[] }).stack, '')
}
