import { randomBytes } from 'node:crypto'
import { mkdir, open, rename, rm } from 'node:fs/promises'
import { join } from 'node:path'
import type { Config } from '../config.ts'
import { uploadsFolderName } from '../services/backup.ts'

/** One company's folder, beside the database and far from what is served. */
export function uploadsFolder({ dataDir }: Pick<Config, 'dataDir'>, companyId: string): string {
  return join(dataDir, uploadsFolderName, companyId)
}

async function syncFolder(folder: string): Promise<void> {
  const handle = await open(folder, 'r')
  try {
    await handle.sync()
  } finally {
    await handle.close()
  }
}

/** Writes a file under a name nobody can guess; it has that name only once it is whole and on the disk. */
export async function keepFile(folder: string, content: Buffer, ending: string): Promise<string> {
  const fileName = `${randomBytes(24).toString('hex')}.${ending}`
  const partial = join(folder, `${fileName}.partial`)
  await mkdir(folder, { recursive: true, mode: 0o700 })
  try {
    const handle = await open(partial, 'wx', 0o600)
    try {
      await handle.writeFile(content)
      await handle.sync()
    } finally {
      await handle.close()
    }
    await rename(partial, join(folder, fileName))
  } catch (error) {
    await rm(partial, { force: true })
    throw error
  }
  await syncFolder(folder)
  return fileName
}
