import { Op, QueryTypes } from 'sequelize'
import { addFoundryEvent } from '@/lib/commands/foundry-event'
import { recordReadings } from '@/lib/commands/record-readings'
import type { Clock } from '@/lib/core/clock'
import { newId } from '@/lib/core/ids'
import type { UploadedRow } from '@/lib/uploads/read-row'
import { keptSettings, type RowOrder, type UploadSettings } from '@/lib/uploads/upload-settings'
import { countWords } from '@/lib/uploads/upload-state'
import { database, Foundry, inTransaction, Sensor, Upload } from '@/models'

/** Longer than any chunk may take; a worker that died is forgotten after it. */
const LEASE_MS = 30_000

/** An upload in the hands of one worker. */
export type ClaimedUpload = {
  id: string
  leaseId: string
  sensorId: number
  fileName: string
  settings: UploadSettings
  order: RowOrder
  timeZone: string
  createdBy: string | null
  /** Where the worker before has come to. */
  bytesDone: number
  linesDone: number
  lastAt: number | null
  errorsBytes: number
}

/** Another worker has it, or somebody has stopped it: nothing of the chunk was kept. */
export class LostUpload extends Error {
  override readonly name = 'LostUpload'
}

/** Takes the oldest upload that waits, or whose worker died, under a lease. Null where there is none. */
export function claimUpload({ clock }: { clock: Clock }): Promise<ClaimedUpload | null> {
  return inTransaction(async () => {
    const now = clock.now()
    const free = { [Op.or]: [{ leaseUntil: null }, { leaseUntil: { [Op.lte]: now } }, { leaseUntil: { [Op.gt]: now + LEASE_MS } }] }
    const upload = await Upload.findOne({
      where: { [Op.or]: [{ state: 'waiting' }, { state: 'running', ...free }] },
      order: [['createdAt', 'ASC']],
    })
    if (!upload) return null
    const leaseId = newId(now)
    await upload.update({ state: 'running', leaseId, leaseUntil: now + LEASE_MS, startedAt: upload.startedAt ?? now })
    const { id, sensorId, fileName, createdBy, bytesDone, linesDone, lastAt, errorsBytes } = upload
    const { order, settings } = keptSettings.parse(upload.settings)
    const { timeZone } = await Foundry.findByPk(1, { rejectOnEmpty: true })
    return { id, leaseId, sensorId, fileName, settings, order, timeZone, createdBy, bytesDone, linesDone, lastAt, errorsBytes }
  })
}

export type UploadChunk = {
  rows: readonly UploadedRow[]
  rejected: number
  /** Behind the last line of the chunk. */
  bytesDone: number
  linesDone: number
  lastAt: number | null
  errorsBytes: number
}

/**
 * Puts a chunk of an upload into the readings and notes how far the file is read, in one transaction: after a crash the next worker
 * begins exactly behind it. Renews the lease.
 *
 * @throws {LostUpload} when it is not this worker's any more.
 */
export function recordChunk(
  { id, leaseId, sensorId, createdBy }: ClaimedUpload,
  chunk: UploadChunk,
  { clock }: { clock: Clock },
): Promise<void> {
  return inTransaction(async () => {
    const { rows, rejected, bytesDone, linesDone, lastAt, errorsBytes } = chunk
    const { added, repeated, marked } = await recordReadings({ sensorId, source: 'sensor', enteredBy: createdBy, rows }, { clock })
    const changed = await database.query(
      `UPDATE uploads SET bytes_done = :bytesDone, lines_done = :linesDone, last_at = :lastAt, errors_bytes = :errorsBytes,
              added = added + :added, repeated = repeated + :repeated, marked = marked + :marked, rejected = rejected + :rejected,
              lease_until = :leaseUntil
        WHERE id = :id AND lease_id = :leaseId AND state = 'running'`,
      {
        type: QueryTypes.BULKUPDATE,
        replacements: {
          id,
          leaseId,
          bytesDone,
          linesDone,
          lastAt,
          errorsBytes,
          added,
          repeated,
          marked,
          rejected,
          leaseUntil: clock.now() + LEASE_MS,
        },
      },
    )
    if (changed === 0) throw new LostUpload('This upload was stopped, or another worker has it.')
  })
}

/** Gives an upload back, so that the next worker need not wait for the lease to end. */
export async function releaseUpload({ id, leaseId }: ClaimedUpload): Promise<void> {
  await inTransaction(() => Upload.update({ leaseId: null, leaseUntil: null }, { where: { id, leaseId, state: 'running' } }))
}

/** Ends an upload with its line in the history. Without effect when it is not this worker's any more. @param error a sentence for a person; null when all is read. */
export async function endUpload(
  { id, leaseId, fileName }: ClaimedUpload,
  error: string | null,
  { clock }: { clock: Clock },
): Promise<void> {
  await inTransaction(async () => {
    const now = clock.now()
    const upload = await Upload.findOne({ where: { id, leaseId, state: 'running' } })
    if (!upload) return
    await upload.update({ state: error === null ? 'done' : 'failed', error, finishedAt: now, leaseId: null, leaseUntil: null })
    const sensor = await Sensor.findByPk(upload.sensorId, { rejectOnEmpty: true })
    const what = `The file ${fileName} for ${sensor.name}`
    const text =
      error === null ? `${what} is read: ${countWords(upload)}.` : `${what} was given up: ${error} Until then ${countWords(upload)}.`
    await addFoundryEvent(
      { type: 'sensor', id: String(sensor.id), name: sensor.name },
      { kind: error === null ? 'upload ended' : 'upload failed', by: null, at: now, text, isDemo: sensor.isDemo },
    )
  })
}
