/* One backup of database and uploads, also while the server runs. The server itself calls it with --daily. */
import { resolve } from 'node:path'
import { ConfigError, readConfig } from '../config.ts'
import { BackupError, makeBackup, makeDailyBackup } from '../services/backup.ts'

try {
  const config = readConfig(process.env)
  const isDaily = process.argv.includes('--daily')
  const [place] = process.argv.slice(2).filter((argument) => !argument.startsWith('-'))
  const backupDir = place === undefined ? config.backupDir : resolve(place)
  const folder = isDaily
    ? await makeDailyBackup(config, new Date())
    : await makeBackup({ ...config, backupDir }, 'manual', new Date())
  console.log(`The backup is in ${folder}`)
} catch (error) {
  if (!(error instanceof ConfigError || error instanceof BackupError)) throw error
  console.error(error.message)
  process.exitCode = 1
}
