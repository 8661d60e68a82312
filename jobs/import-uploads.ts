import { millisecondsInDay } from 'date-fns/constants'
import { claimUpload, endUpload, LostUpload, recordChunk, releaseUpload, type ClaimedUpload } from '@/lib/commands/work-on-upload'
import type { Clock } from '@/lib/core/clock'
import { log } from '@/lib/core/log'
import { hasOpenUpload } from '@/lib/queries/upload-status'
import { csvText } from '@/lib/server/csv'
import { storageTrouble } from '@/lib/server/problem'
import { openErrors, removeRows, rowsFile, type ErrorsWriter } from '@/lib/server/upload-files'
import { readFileLines, type FileLine } from '@/lib/server/upload-lines'
import { readRow, type UploadedRow } from '@/lib/uploads/read-row'

export type ImportParts = {
  clock: Clock
  isStopping: () => boolean
  /** Milliseconds that only ever grow. */
  monotonic: () => number
  /** Waits; less long when the worker is asked to stop. */
  sleep: (milliseconds: number) => Promise<void>
}

const LOOK_EVERY_MS = 2000
const AGAIN_AFTER_MS = 10_000

/**
 * A chunk holds the write lock for about so long, and leaves it free for longer than SQLite waits between two tries of a busy writer
 * (25 ms for the first tenth of a second): whoever wants to log a dip gets in after one chunk at the latest.
 */
const HOLD_MS = 40
const FREE_MS = 30
/** Fewer cost more by their number than they hold the lock shorter. */
const FEWEST_ROWS = 200
const MOST_ROWS = 2000
const FIRST_ROWS = 400
/** All hours between the first and the last row of a chunk are looked at, so that one from another year would be dear. */
const LONGEST_SPAN_MS = 7 * millisecondsInDay
/** Without a good row among them. */
const MOST_LINES = 4000

const MOST_ERRORS_BYTES = 4 * 1024 * 1024
const MOST_ERROR_CELLS = 20
const LONGEST_ERROR_CELL = 200

/**
 * Works on uploads for as long as the worker lives, apart from the passes of the minute, which never wait for a file.
 *
 * @returns settles when the chunk under way is done, after `isStopping`.
 */
export async function importUploads(parts: ImportParts): Promise<void> {
  while (!parts.isStopping()) {
    const outcome = await importNext(parts).catch((error: unknown) => {
      log('upload.unclaimed', { error: String(error) })
      return 'again' as const
    })
    if (outcome === 'nothing') await parts.sleep(LOOK_EVERY_MS)
    if (outcome === 'again') await parts.sleep(AGAIN_AFTER_MS)
  }
}

export type ImportOutcome = 'nothing' | 'done' | 'failed' | 'lost' | 'given back' | 'again'

/** Takes the next upload that waits and reads it to its end, or until the worker is asked to stop. */
export async function importNext(parts: ImportParts): Promise<ImportOutcome> {
  const { clock } = parts
  if (!(await hasOpenUpload())) return 'nothing'
  const upload = await claimUpload({ clock })
  if (!upload) return 'nothing'
  log('upload.begun', { uploadId: upload.id, fromLine: upload.linesDone })
  try {
    if (!(await readAll(upload, parts))) {
      await releaseUpload(upload)
      return 'given back'
    }
    await endUpload(upload, null, { clock })
    log('upload.done', { uploadId: upload.id })
    return 'done'
  } catch (error) {
    return afterFailure(upload, error, parts)
  }
}

async function afterFailure(upload: ClaimedUpload, error: unknown, { clock }: ImportParts): Promise<ImportOutcome> {
  if (error instanceof LostUpload) {
    // Stopped by somebody: then nobody needs its file.
    if (!(await hasOpenUpload(upload.id))) await removeRows(upload.id)
    return 'lost'
  }
  log('upload.failed', { uploadId: upload.id, error: error instanceof Error ? error.stack : String(error) })
  if (storageTrouble(error)) {
    await releaseUpload(upload).catch(() => {})
    return 'again'
  }
  const isMissing = error instanceof Error && 'code' in error && error.code === 'ENOENT'
  await endUpload(upload, isMissing ? 'Its file is not here any more. Bring it again.' : 'A fault of Kilnward, which stands in its log.', {
    clock,
  })
  return 'failed'
}

/** @returns false when it was broken off because the worker stops: the chunk that was begun is left to the next one. */
async function readAll(upload: ClaimedUpload, parts: ImportParts): Promise<boolean> {
  const errors = await openErrors(upload.id, upload.errorsBytes)
  try {
    const { take, finish } = chunksOf(upload, errors, parts)
    const from = { bytes: upload.bytesDone, lines: upload.linesDone }
    for await (const block of readFileLines(rowsFile(upload.id), upload.settings, from)) {
      for (const line of block) {
        await take(line)
        if (parts.isStopping()) return false
      }
    }
    await finish()
    return true
  } finally {
    await errors.close()
  }
}

/** Gathers lines into chunks and puts each into the readings. */
function chunksOf(upload: ClaimedUpload, errors: ErrorsWriter, { clock, monotonic, sleep }: ImportParts) {
  const { settings, order, timeZone } = upload
  let place = { bytesDone: upload.bytesDone, linesDone: upload.linesDone, lastAt: upload.lastAt }
  let rows: UploadedRow[] = []
  let [first, last] = [Infinity, -Infinity]
  let [lines, rejected, errorsText] = [0, 0, '']
  let errorsBytes = upload.errorsBytes
  let rowsAtOnce = FIRST_ROWS
  let freeUntil = -Infinity

  const record = async () => {
    if (lines === 0) return
    const wait = freeUntil - monotonic()
    if (wait > 0) await sleep(wait)
    const nextBytes = errorsText === '' ? errorsBytes : errorsBytes + (await errors.write(errorsText, errorsBytes))
    const began = monotonic()
    await recordChunk(upload, { rows, rejected, ...place, errorsBytes: nextBytes }, { clock })
    const took = monotonic() - began
    freeUntil = monotonic() + FREE_MS
    if (rows.length > 0) rowsAtOnce = Math.round(Math.min(MOST_ROWS, Math.max(FEWEST_ROWS, rows.length * clamp(HOLD_MS / took))))
    errorsBytes = nextBytes
    rows = []
    ;[first, last] = [Infinity, -Infinity]
    ;[lines, rejected, errorsText] = [0, 0, '']
  }

  const complain = (line: FileLine, reason: string) => {
    const written = errorsBytes + errorsText.length
    if (written > MOST_ERRORS_BYTES) return
    if (written === 0) errorsText = errorsHead
    errorsText += errorLine(line.number, reason, line.cells ?? [])
    if (errorsBytes + errorsText.length > MOST_ERRORS_BYTES) {
      errorsText += errorLine(null, 'There are more. They are counted, and not listed.', [])
    }
  }

  const take = async (line: FileLine) => {
    const outcome = isData(line, settings.linesBefore)
      ? line.cells === null
        ? { row: null, reason: 'This line cannot be split into columns: it is too long, or a quotation mark is not closed.' }
        : readRow(line.cells, { settings, order, timeZone, lastAt: place.lastAt, now: clock.now() })
      : null
    const at = outcome?.row?.measuredAt
    if (at !== undefined && Math.max(last, at) - Math.min(first, at) > LONGEST_SPAN_MS) await record()
    place = { bytesDone: line.end, linesDone: line.number, lastAt: at ?? place.lastAt }
    lines += 1
    if (outcome?.row === null) rejected += 1
    if (outcome && outcome.reason !== null) complain(line, outcome.reason)
    if (outcome?.row) {
      rows.push(outcome.row)
      ;[first, last] = [Math.min(first, outcome.row.measuredAt), Math.max(last, outcome.row.measuredAt)]
    }
    if (rows.length >= rowsAtOnce || lines >= MOST_LINES) await record()
  }

  return { take, finish: record }
}

const clamp = (factor: number) => Math.min(1.5, Math.max(0.5, factor))

const isData = ({ number, cells }: FileLine, linesBefore: number) =>
  number > linesBefore && (cells === null || cells.some((cell) => cell.trim() !== ''))

const errorsHead = csvText(
  [
    { head: 'line', value: () => '' },
    { head: 'reason', value: () => '' },
    { head: 'as it stands in the file', value: () => '' },
  ],
  [],
)

/** The number of a line, why it was refused, and its cells. */
function errorLine(number: number | null, reason: string, cells: readonly string[]): string {
  const values = [number, reason, ...cells.slice(0, MOST_ERROR_CELLS).map((cell) => cell.slice(0, LONGEST_ERROR_CELL))]
  return csvText(
    values.map((value) => ({ head: '', value: () => value })),
    [null],
    false,
  )
}
