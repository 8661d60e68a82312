import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import { loadFoundry } from '@/lib/queries/load-foundry'
import { rowsFile } from '@/lib/server/upload-files'
import { cellsOf, readHead, sampleFile } from '@/lib/server/upload-lines'
import { guessDateForm, guessDelimiter, guessSettings, namesOf, timesOf } from '@/lib/uploads/guess-settings'
import { guessEncoding } from '@/lib/uploads/guess-encoding'
import { readRow, type RowOutcome } from '@/lib/uploads/read-row'
import { rowOrder } from '@/lib/uploads/row-order'
import { MOST_COLUMNS, type RowOrder, type UploadSettings } from '@/lib/uploads/upload-settings'
import type { UploadPreview } from '@/lib/uploads/upload-contract'
import { Upload } from '@/models'

const ROWS_SHOWN = 12
/** One after the other from the first on, and then so many from all over the rest. */
const ROWS_TRIED = 400
const ROWS_SPREAD = 200
const SAMPLES = 3
const REASONS_SHOWN = 5
const LONGEST_CELL = 60

type Line = { number: number; cells: string[] }
type Sample = { encoding: UploadSettings['encoding']; head: string[]; spread: string[] }

async function sampleOf(uploadId: string, encoding: UploadSettings['encoding'] | null): Promise<Sample> {
  const upload = await Upload.findByPk(uploadId)
  if (!upload) throw new AppError('not_found', 'There is no such upload.')
  try {
    const file = rowsFile(uploadId)
    const chosen = encoding ?? guessEncoding(await readHead(file))
    return { encoding: chosen, ...(await sampleFile(file, chosen)) }
  } catch (error) {
    if (!(error instanceof Error && 'code' in error && error.code === 'ENOENT')) throw error
    throw new AppError('not_found', 'The file of this upload is not kept any more. Bring it again.', {}, { cause: error })
  }
}

const isFilled = ({ cells }: { cells: readonly string[] }) => cells.some((cell) => cell.trim() !== '')

/** Rows of data of a sample, as the settings see them: blank lines left out. Those from further down have no line number. */
function dataOf({ head, spread }: Sample, { delimiter, linesBefore }: Pick<UploadSettings, 'delimiter' | 'linesBefore'>) {
  const all = cellsOf(head, delimiter).map((cells, index): Line => ({ number: index + 1, cells: cells ?? [] }))
  const filled = all.slice(linesBefore).filter(isFilled)
  const rest = filled.slice(ROWS_TRIED)
  // The last one is among them.
  const step = Math.max(1, Math.ceil(rest.length / ROWS_SPREAD))
  return {
    all: all.map(({ cells }) => cells),
    first: filled.slice(0, ROWS_TRIED),
    spread: [
      ...rest.filter((_, index) => (rest.length - 1 - index) % step === 0).map(({ cells }) => cells),
      ...cellsOf(spread, delimiter)
        .map((cells) => cells ?? [])
        .filter((cells) => isFilled({ cells })),
    ],
  }
}

/**
 * The first rows of an upload and how they are read, with some from all over it.
 *
 * @param settings null for a guess.
 * @throws {AppError} not_found.
 */
export async function loadUploadPreview(
  uploadId: string,
  settings: UploadSettings | null,
  { clock }: { clock: Clock },
): Promise<UploadPreview> {
  const [sample, { timeZone }] = await Promise.all([sampleOf(uploadId, settings?.encoding ?? null), loadFoundry()])
  const chosen = settings ?? guessOf(sample)
  const { all, first, spread } = dataOf(sample, chosen)
  const rows = [...first.map(({ cells }) => cells), ...spread]
  const order = rowOrder(rows, { settings: chosen, timeZone, now: clock.now() })
  const outcomes = readAll(rows, { settings: chosen, timeZone, order, now: clock.now() })
  const good = goodOf(outcomes)
  const instants = good.map(({ measuredAt }) => measuredAt)
  const times = timesOf(rows, chosen)
  const guess = guessDateForm(
    times.map(({ date }) => date),
    times.map(({ clock: at }) => at),
  )
  const names = namesOf(all, chosen.linesBefore)
  const width = Math.min(MOST_COLUMNS, Math.max(0, ...first.map(({ cells }) => cells.length)))
  return {
    settings: chosen,
    dates: guess.isAmbiguous ? 'ambiguous' : guess.form === null ? 'unread' : 'sure',
    dateForms: guess.isAmbiguous ? ['dmy', 'mdy'] : guess.form === null ? [] : [guess.form],
    columns: Array.from({ length: width }, (_, column) => ({
      name: (names[column] ?? '').slice(0, LONGEST_CELL),
      samples: first.slice(0, SAMPLES).map(({ cells }) => (cells[column] ?? '').slice(0, LONGEST_CELL)),
    })),
    rows: first.slice(0, ROWS_SHOWN).map(({ number, cells }, index) => shown(number, cells, outcomes[index])),
    looked: outcomes.length,
    good: good.length,
    from: instants.length === 0 ? null : instants.reduce((one, other) => Math.min(one, other)),
    to: instants.length === 0 ? null : instants.reduce((one, other) => Math.max(one, other)),
    reasons: reasonsOf(outcomes),
  }
}

function guessOf(sample: Sample): UploadSettings {
  const delimiter = guessDelimiter(sample.head)
  const { all, spread } = dataOf(sample, { delimiter, linesBefore: 0 })
  return guessSettings(all, spread, { encoding: sample.encoding, delimiter }).settings
}

type ReadParts = { settings: UploadSettings; timeZone: string; order: RowOrder; now: number }

function readAll(rows: readonly (readonly string[])[], parts: ReadParts): RowOutcome[] {
  let lastAt: number | null = null
  return rows.map((cells) => {
    const outcome = readRow(cells, { ...parts, lastAt })
    lastAt = outcome.row?.measuredAt ?? lastAt
    return outcome
  })
}

function shown(line: number, cells: readonly string[], outcome: RowOutcome | undefined): UploadPreview['rows'][number] {
  const row = outcome?.row
  return {
    line,
    cells: cells.slice(0, MOST_COLUMNS).map((cell) => cell.slice(0, LONGEST_CELL)),
    measuredAt: row?.measuredAt ?? null,
    airTempC: row?.airTempC ?? null,
    relHumidityPct: row?.relHumidityPct ?? null,
    pressurePa: row?.pressurePa ?? null,
    reason: outcome?.reason ?? null,
  }
}

/** Readings that count. */
const goodOf = (outcomes: readonly RowOutcome[]) => outcomes.flatMap(({ row, reason }) => (row && reason === null ? [row] : []))

/** Reasons that differ in what the row says are of one kind. */
function reasonsOf(outcomes: readonly RowOutcome[]): UploadPreview['reasons'] {
  const kinds = new Map<string, { reason: string; count: number }>()
  for (const { reason } of outcomes) {
    if (reason === null) continue
    const kind = reason.replaceAll(/‘.*?’|says .*/g, '')
    const known = kinds.get(kind)
    if (known) known.count += 1
    else kinds.set(kind, { reason, count: 1 })
  }
  return [...kinds.values()].toSorted((one, other) => other.count - one.count).slice(0, REASONS_SHOWN)
}

/** Which way the rows of an upload run when read so, and how many of those looked at are good. */
export async function readUploadOrder(
  uploadId: string,
  settings: UploadSettings,
  { clock }: { clock: Clock },
): Promise<{ order: RowOrder; good: number }> {
  const [sample, { timeZone }] = await Promise.all([sampleOf(uploadId, settings.encoding), loadFoundry()])
  const { first, spread } = dataOf(sample, settings)
  const rows = [...first.map(({ cells }) => cells), ...spread]
  const order = rowOrder(rows, { settings, timeZone, now: clock.now() })
  return { order, good: goodOf(readAll(rows, { settings, timeZone, order, now: clock.now() })).length }
}
