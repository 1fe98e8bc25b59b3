import { execFileSync } from 'node:child_process'

/** The Chromium on the PATH. */
export function findChromium(): string {
  const found = execFileSync('sh', ['-c', 'command -v chromium || command -v chromium-browser'])
  return found.toString().trim()
}

/** Runs as root too, without a graphics card, and speaks to nobody but the page. */
export const chromiumArguments = [
  '--no-sandbox',
  '--disable-gpu',
  '--disable-quic',
  '--no-first-run',
  '--disable-background-networking',
  '--disable-component-update',
  '--disable-sync',
]
