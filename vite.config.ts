import { readdirSync, readFileSync, writeFileSync } from 'node:fs'
import { availableParallelism } from 'node:os'
import { join } from 'node:path'
import { brotliCompressSync, constants, gzipSync } from 'node:zlib'
import { pathToFileURL } from 'node:url'
import vue from '@vitejs/plugin-vue'
import { build } from 'vite'
import type { Plugin } from 'vite'
import { defineConfig } from 'vitest/config'

const compressible = /\.(html|js|css|svg|json|txt|webmanifest|map)$/
const worthCompressingBytes = 512

/** Leaves a .br and a .gz beside each text file, so that the server never compresses the client itself. */
function precompress(): Plugin {
  let outDir = 'dist'
  return {
    name: 'precompress',
    apply: 'build',
    enforce: 'post',
    configResolved(config) {
      outDir = config.build.outDir
    },
    closeBundle: {
      order: 'post',
      sequential: true,
      handler() {
        for (const entry of readdirSync(outDir, { recursive: true, withFileTypes: true })) {
          const path = join(entry.parentPath, entry.name)
          if (!entry.isFile() || !compressible.test(entry.name)) continue
          const content = readFileSync(path)
          if (content.length < worthCompressingBytes) continue
          writeFileSync(`${path}.gz`, gzipSync(content, { level: 9 }))
          const params = { [constants.BROTLI_PARAM_QUALITY]: constants.BROTLI_MAX_QUALITY }
          writeFileSync(`${path}.br`, brotliCompressSync(content, { params }))
        }
      },
    },
  }
}

const entryScript = /<script type="module"[^>]* src="([^"]+)"><\/script>/

/** Where the page as drawn is the right one, its first paint waits for no script, not even for one that is kept. */
function startAfterPaint(entry: string): string {
  const start = `const start = () => import('${entry}')
      const isWaiting = !document.hidden && !document.documentElement.classList.contains('is-starting')
      if (isWaiting) new PerformanceObserver(start).observe({ type: 'paint', buffered: true })
      setTimeout(start, isWaiting ? 1000 : 0)`
  return `<link rel="modulepreload" crossorigin href="${entry}"><script type="module">${start}</script>`
}

/** What of Inter the verdict is drawn in. */
const heroFonts = /inter-latin-(400|800)-normal-[^/]*\.woff2$/

/**
 * The page a visitor finds is drawn into index.html, styles and theme within, so that its verdict stands with the first
 * answer of the server and before any script of the application has run.
 */
function prerender(): Plugin {
  const outDir = join(import.meta.dirname, 'node_modules/.sixteenth/prerender')
  async function draw(): Promise<string> {
    await build({
      configFile: false,
      root: import.meta.dirname,
      plugins: [vue()],
      publicDir: false,
      logLevel: 'warn',
      build: { ssr: 'src/prerender.ts', outDir, emptyOutDir: true, copyPublicDir: false },
    })
    const { href } = pathToFileURL(join(outDir, 'prerender.js'))
    const drawn = (await import(`${href}?${Date.now()}`)) as { prerender: () => Promise<string> }
    return drawn.prerender()
  }
  return {
    name: 'prerender',
    apply: 'build',
    transformIndexHtml: {
      order: 'post',
      async handler(page, { bundle = {} }) {
        const drawn = await draw()
        const theme = readFileSync(join(import.meta.dirname, 'src/public/theme.js'), 'utf8')
        const fonts = Object.keys(bundle).filter((name) => heroFonts.test(name))
        return {
          html: page
            .replace('<!--app-->', () => drawn)
            .replace('<script src="/theme.js"></script>', () => `<script>${theme}</script>`)
            .replace(entryScript, (_, name: string) => startAfterPaint(name))
            .replaceAll('rel="modulepreload"', 'rel="modulepreload" fetchpriority="low"')
            .replace(/<link rel="stylesheet"[^>]*href="\/([^"]+)"[^>]*>/g, (link, name: string) => {
              const file = bundle[name]
              return file?.type === 'asset' ? `<style>${file.source.toString()}</style>` : link
            }),
          tags: fonts.map((name) => ({
            tag: 'link',
            attrs: { rel: 'preload', href: `/${name}`, as: 'font', type: 'font/woff2', crossorigin: '' },
            injectTo: 'head' as const,
          })),
        }
      },
    },
  }
}

interface ModuleGraph {
  getModuleInfo(id: string): { isEntry: boolean; importers: readonly string[] } | null
}

const isFirst = new Map<string, boolean>()

/** Whether the first script imports this, by however many steps but none of them lazy. */
function isImportedFirst(id: string, graph: ModuleGraph): boolean {
  const known = isFirst.get(id)
  if (known !== undefined) return known
  isFirst.set(id, false)
  const info = graph.getModuleInfo(id)
  const isIt = info !== null && (info.isEntry || info.importers.some((each) => isImportedFirst(each, graph)))
  isFirst.set(id, isIt)
  return isIt
}

const firstChunks = [
  ['prime', /node_modules[\\/]@?prime/],
  ['words', /[\\/](vue-i18n|@intlify|src[\\/]i18n)[\\/]/],
  ['air', /[\\/]shared[\\/]/],
] as const

/**
 * What the first page needs comes in a few files of ours: a phone asks for few things at a time, and is heard between
 * one file and the next.
 */
function firstChunkName(id: string, graph: ModuleGraph): string | null {
  if (!isImportedFirst(id, graph)) return null
  return firstChunks.find(([, test]) => test.test(id))?.[0] ?? 'first'
}

export default defineConfig({
  plugins: [vue(), prerender(), precompress()],
  publicDir: 'src/public',
  define: {
    __VUE_I18N_LEGACY_API__: false,
    __VUE_I18N_FULL_INSTALL__: false,
    __INTLIFY_PROD_DEVTOOLS__: false,
  },
  server: {
    port: 5173,
    strictPort: true,
    // The host stays what was typed, or the API would take our own page for that of another site.
    proxy: { '/api': { target: `http://127.0.0.1:${process.env.PORT ?? 3000}`, changeOrigin: false } },
  },
  build: {
    outDir: 'dist',
    target: 'es2022',
    modulePreload: { polyfill: false },
    rolldownOptions: {
      output: {
        codeSplitting: {
          // Without this the runtime of Vue lands in whichever library chunk is made first.
          includeDependenciesRecursively: false,
          groups: [
            {
              name: 'vue',
              test: /node_modules[\\/](@vue|vue|vue-router|pinia|vue-i18n|@intlify)[\\/]/,
              priority: 2,
            },
            { name: firstChunkName, debugName: 'first' },
            { name: 'chart', test: /node_modules[\\/](chart\.js|vue-chartjs|chartjs-|@kurkle)/, priority: 1 },
          ],
        },
      },
    },
  },
  test: {
    // One a core, where by itself it would leave one to whoever works beside it.
    maxWorkers: availableParallelism(),
    projects: [
      {
        extends: true,
        test: {
          name: 'node',
          environment: 'node',
          include: ['tests/{reference,shared,server}/**/*.test.ts'],
          testTimeout: 60_000,
        },
      },
      {
        extends: true,
        test: { name: 'client', environment: 'happy-dom', include: ['tests/src/**/*.test.ts'] },
      },
    ],
  },
})
