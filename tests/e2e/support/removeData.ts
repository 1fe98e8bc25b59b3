import { rmSync } from 'node:fs'

export default function removeData() {
  const dataDir = process.env.SIXTEENTH_E2E_DATA
  if (dataDir) rmSync(dataDir, { recursive: true, force: true })
}
