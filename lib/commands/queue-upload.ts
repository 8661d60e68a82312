import { addFoundryEvent } from '@/lib/commands/foundry-event'
import { stopBeingDemo } from '@/lib/commands/stop-being-demo'
import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import type { Actor } from '@/lib/members/actor'
import { readUploadOrder } from '@/lib/queries/upload-preview'
import type { UploadSettings } from '@/lib/uploads/upload-settings'
import { inTransaction, Sensor, Upload } from '@/models'

/**
 * Hands an upload to the worker, to be read as `settings` say.
 *
 * @throws {AppError} not_found; conflict when it is no draft any more or its sensor is retired; invalid_input with `fields` while the
 * form of the dates is open; unprocessable when not one row of it can be read that way.
 */
export async function queueUpload(
  uploadId: string,
  settings: UploadSettings,
  { member, clock }: { member: Actor; clock: Clock },
): Promise<void> {
  if (settings.dateForm === null) {
    const message = 'Choose how the dates are written.'
    throw new AppError('invalid_input', message, { fields: [{ path: 'dateForm', message }] })
  }
  const { order, good } = await readUploadOrder(uploadId, settings, { clock })
  if (good === 0) throw new AppError('unprocessable', 'Not one row can be read this way. Look at the reasons beside the rows.')
  await inTransaction(async () => {
    const now = clock.now()
    const upload = await Upload.findByPk(uploadId)
    if (!upload) throw new AppError('not_found', 'There is no such upload.')
    if (upload.state !== 'draft') throw new AppError('conflict', 'This file has been handed over already, or was put away.')
    const sensor = await Sensor.findByPk(upload.sensorId, { rejectOnEmpty: true })
    if (sensor.retiredAt !== null) throw new AppError('conflict', `${sensor.name} is retired. Take it into use again first.`)
    await upload.update({ state: 'waiting', settings: { settings, order } })
    await stopBeingDemo(sensor, member)
    await addFoundryEvent(
      { type: 'sensor', id: String(sensor.id), name: sensor.name },
      { kind: 'upload begun', by: member, at: now, text: `Readings for ${sensor.name} are being read from the file ${upload.fileName}.` },
    )
  })
}
