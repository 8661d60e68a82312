import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import { newId } from '@/lib/core/ids'
import type { Actor } from '@/lib/members/actor'
import { keepBody, removeRows } from '@/lib/server/upload-files'
import { LARGEST_UPLOAD_BYTES, type UploadAnswer } from '@/lib/uploads/upload-contract'
import { inTransaction, Sensor, Upload } from '@/models'

export type ReceivedFile = { sensorId: number; fileName: string; body: ReadableStream<Uint8Array> | null; announcedBytes: number }

/**
 * Takes a file of readings in, as a draft: nothing of it counts until somebody has said how it is to be read.
 *
 * @returns with the earlier upload of the same file for the same sensor, if it was imported; it may be imported again, which adds nothing.
 * @throws {AppError} not_found or conflict for the sensor; see keepBody for the file.
 */
export async function receiveUpload(
  { sensorId, fileName, body, announcedBytes }: ReceivedFile,
  { member, clock }: { member: Actor; clock: Clock },
): Promise<UploadAnswer> {
  await sensorInUse(sensorId)
  const uploadId = newId(clock.now())
  const { sizeBytes, sha256 } = await keepBody(body, { uploadId, announcedBytes, largestBytes: LARGEST_UPLOAD_BYTES })
  try {
    return await inTransaction(async () => {
      // It may have been retired while a large file came in.
      await sensorInUse(sensorId)
      const earlier = await Upload.findOne({ where: { sensorId, sha256, state: 'done' }, order: [['finishedAt', 'DESC']] })
      await Upload.create({
        id: uploadId,
        sensorId,
        fileName,
        sha256,
        sizeBytes,
        state: 'draft',
        createdBy: member.id,
        createdAt: clock.now(),
      })
      return {
        uploadId,
        sizeBytes,
        sha256,
        repeatOf: earlier && { uploadId: earlier.id, importedAt: earlier.finishedAt ?? earlier.createdAt },
      }
    })
  } catch (error) {
    await removeRows(uploadId)
    throw error
  }
}

async function sensorInUse(sensorId: number): Promise<void> {
  const sensor = await Sensor.findByPk(sensorId)
  if (!sensor) throw new AppError('not_found', 'There is no such sensor.')
  if (sensor.retiredAt !== null) throw new AppError('conflict', `${sensor.name} is retired. Take it into use again first.`)
}
