import { addFoundryEvent } from '@/lib/commands/foundry-event'
import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import type { Actor } from '@/lib/members/actor'
import { removeRows } from '@/lib/server/upload-files'
import { countText, isEnded } from '@/lib/uploads/upload-state'
import { inTransaction, Sensor, Upload } from '@/models'

/**
 * Stops an upload. What the worker has read of it stays; a draft is put away as if it had never come.
 *
 * @throws {AppError} not_found; conflict when it has ended.
 */
export async function cancelUpload(uploadId: string, { member, clock }: { member: Actor; clock: Clock }): Promise<void> {
  await inTransaction(async () => {
    const now = clock.now()
    const upload = await Upload.findByPk(uploadId)
    if (!upload) throw new AppError('not_found', 'There is no such upload.')
    if (isEnded(upload.state)) throw new AppError('conflict', 'This upload has ended already.')
    const wasDraft = upload.state === 'draft'
    await upload.update({ state: 'cancelled', finishedAt: now, leaseId: null, leaseUntil: null })
    if (wasDraft) return
    const sensor = await Sensor.findByPk(upload.sensorId, { rejectOnEmpty: true })
    const kept = upload.added === 0 ? 'Nothing of it was kept.' : `${countText(upload.added)} readings of it were in and stay.`
    await addFoundryEvent(
      { type: 'sensor', id: String(sensor.id), name: sensor.name },
      { kind: 'upload stopped', by: member, at: now, text: `The file ${upload.fileName} for ${sensor.name} was stopped. ${kept}` },
    )
  })
  await removeRows(uploadId)
}
