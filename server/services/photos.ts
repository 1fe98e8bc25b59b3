import { createHash } from 'node:crypto'
import { existsSync } from 'node:fs'
import { rm } from 'node:fs/promises'
import { join } from 'node:path'
import { and, eq, sql } from 'drizzle-orm'
import { workLimits } from '#shared/contracts/limits.ts'
import type { Photo } from '#shared/contracts/work.ts'
import type { Actor } from '../actor.ts'
import type { AppContext } from '../context.ts'
import type { Database } from '../db/client.ts'
import { isStorageFailure } from '../db/storageFailure.ts'
import { photos } from '../db/schema/index.ts'
import { makeProblem } from '../problems.ts'
import { keepFile, uploadsFolder } from '../uploads/files.ts'
import { reencode } from '../uploads/reencode.ts'
import { writeAudit } from './audit.ts'
import { oncePerDatabase } from './recordQueries.ts'

type PhotoRow = typeof photos.$inferSelect
type Context = Pick<AppContext, 'config' | 'database' | 'now'>

const queriesIn = oncePerDatabase(({ queries }) => {
  const isOfCompany = eq(photos.companyId, sql.placeholder('companyId'))
  return {
    find: queries
      .select()
      .from(photos)
      .where(and(isOfCompany, eq(photos.id, sql.placeholder('id'))))
      .prepare(),
    size: queries
      .select({ bytes: sql<number>`coalesce(sum(${photos.bytes}), 0)` })
      .from(photos)
      .where(isOfCompany)
      .prepare(),
  }
})

function toPhoto({ id, widthPx, heightPx, bytes, by, receivedAt }: PhotoRow): Photo {
  return { id, widthPx, heightPx, bytes, by, receivedAt }
}

/** What is there under this id already: the same picture, or a refusal of another. */
function findSame(database: Database, companyId: string, id: string, contentHash: string): Photo | null {
  const row = queriesIn(database).find.get({ companyId, id })
  if (!row) return null
  if (row.contentHash !== contentHash) throw makeProblem('id-in-use', 'Another photo was sent under this id.')
  return toPhoto(row)
}

function refuseOverQuota(database: Database, companyId: string, more: number): void {
  const { bytes = 0 } = queriesIn(database).size.get({ companyId }) ?? {}
  if (bytes + more <= workLimits.photoQuotaBytes) return
  const megabytes = workLimits.photoQuotaBytes / 1_000_000
  throw makeProblem('too-many-records', `The company’s photos fill the ${megabytes} MB that they may take.`)
}

/** What the file system says where the request is not to blame, in the words of the database. */
function refuseStorageFailure(error: unknown): never {
  const { code } = error as { code?: unknown }
  if (
    isStorageFailure(error) ||
    ['ENOSPC', 'EDQUOT', 'EROFS', 'EACCES', 'EPERM', 'EIO'].includes(String(code))
  ) {
    throw makeProblem(
      'storage-unavailable',
      'This could not be saved: the disk is full or may not be written.',
    )
  }
  throw error
}

/** Keeps a photo, once however often it is sent; first the picture itself, then the row that tells of it. */
export async function addPhoto(
  { config, database, now }: Context,
  actor: Actor,
  id: string,
  content: Buffer,
): Promise<Photo> {
  const { companyId, accountId, name } = actor
  const contentHash = createHash('sha256').update(content).digest('hex')
  const same = findSame(database, companyId, id, contentHash)
  if (same) return same
  refuseOverQuota(database, companyId, 0)
  const { jpeg, widthPx, heightPx } = await reencode(content)
  refuseOverQuota(database, companyId, jpeg.length)
  const folder = uploadsFolder(config, companyId)
  const fileName = await keepFile(folder, jpeg, 'jpg').catch(refuseStorageFailure)
  let isKept = false
  try {
    return database.transact((writer) => {
      const sentMeanwhile = findSame(database, companyId, id, contentHash)
      if (sentMeanwhile) return sentMeanwhile
      refuseOverQuota(database, companyId, jpeg.length)
      const at = now()
      const row: PhotoRow = {
        companyId,
        id,
        fileName,
        contentHash,
        bytes: jpeg.length,
        widthPx,
        heightPx,
        byId: accountId,
        by: name,
        receivedAt: at.toISOString(),
      }
      writer.insert(photos).values(row).run()
      writeAudit(writer, actor, at, { action: 'photo.added', subject: id, subjectId: id })
      isKept = true
      return toPhoto(row)
    })
  } catch (error) {
    isKept = false
    throw error
  } finally {
    if (!isKept) await rm(join(folder, fileName), { force: true })
  }
}

/** Where a photo of the company lies. */
export function findPhotoFile(
  { config, database }: Pick<Context, 'config' | 'database'>,
  { companyId }: Pick<Actor, 'companyId'>,
  id: string,
): { root: string; fileName: string } {
  const row = queriesIn(database).find.get({ companyId, id })
  const root = uploadsFolder(config, companyId)
  if (!row || !existsSync(join(root, row.fileName))) {
    throw makeProblem('not-found', 'There is nothing at this address.')
  }
  return { root, fileName: row.fileName }
}
