/* Puts a backup in the place of the data, once it was checked and no server uses them. */
import { resolve } from 'node:path'
import { ConfigError, readConfig } from '../config.ts'
import { BackupError } from '../services/backup.ts'
import { restoreBackup } from '../services/restore.ts'

try {
  const [folder] = process.argv.slice(2)
  if (folder === undefined)
    throw new BackupError('Say which backup: npm run restore -- <folder of the backup>')
  const aside = await restoreBackup(readConfig(process.env), resolve(folder), new Date())
  console.log('The backup is in place; everybody signs in again.')
  console.log(`What it replaced is kept in ${aside}`)
} catch (error) {
  if (!(error instanceof ConfigError || error instanceof BackupError)) throw error
  console.error(error.message)
  process.exitCode = 1
}
