import { millisecondsInDay, millisecondsInHour } from 'date-fns/constants'
import { Op } from 'sequelize'
import type { Clock } from '@/lib/core/clock'
import { removeStoredFile, storedFiles } from '@/lib/server/upload-files'
import { inTransaction, Upload } from '@/models'

/** A file for which nobody has said how it is to be read. */
const DRAFTS_KEPT_MS = millisecondsInDay
/** Counted from the end of the upload. */
const KEPT_MS = { rows: 7 * millisecondsInDay, errors: 90 * millisecondsInDay }
/** Younger than this, a file without a row may be one that is just coming in. */
const ORPHANS_KEPT_MS = 6 * millisecondsInHour

/** Puts drafts away that nobody went on with, and takes files from the disk that nobody needs any more. What was read of them stays. */
export async function pruneUploads({ clock }: { clock: Clock }): Promise<{ drafts: number; uploadFiles: number }> {
  const now = clock.now()
  const [drafts] = await inTransaction(() =>
    Upload.update({ state: 'cancelled', finishedAt: now }, { where: { state: 'draft', createdAt: { [Op.lt]: now - DRAFTS_KEPT_MS } } }),
  )
  const files = await storedFiles()
  const uploads = await Upload.findAll({ where: { id: files.map(({ uploadId }) => uploadId) } })
  const byId = new Map(uploads.map((upload) => [upload.id, upload]))
  const old = files.filter(({ uploadId, kind, writtenAt }) => {
    const upload = byId.get(uploadId)
    if (!upload) return now - writtenAt > ORPHANS_KEPT_MS
    if (upload.finishedAt === null) return false
    return upload.settings === null || now - upload.finishedAt > KEPT_MS[kind]
  })
  for (const file of old) await removeStoredFile(file)
  return { drafts, uploadFiles: old.length }
}
