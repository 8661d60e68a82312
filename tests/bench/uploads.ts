// One part of the bench, in a process of its own because it has records of its own: `node --import tsx tests/bench/uploads.ts ROWS`.
// Prints the rows of the table as JSON.
import { execFileSync, spawnSync } from 'node:child_process'
import { createWriteStream, mkdirSync, mkdtempSync, rmSync, statSync } from 'node:fs'
import { loadavg, tmpdir } from 'node:os'
import { join } from 'node:path'
import { setTimeout as sleep } from 'node:timers/promises'
import { openPlainHandle } from '@/db/plain-handle'
import type { SeededMember } from '@/tests/setup/server'

const MINUTE = 60_000
const DIP_EVERY_MS = 150
const CALM_DIPS = 100

type UploadFigures = {
  rows: number
  rowsPerSecond: number
  /** Null where the sqlite3 shell is not there. */
  shellRowsPerSecond: number | null
  calm: Delays
  during: Delays
  load: number
}
type Delays = { median: number; p95: number; max: number; count: number }

/** One-minute rows of a logger, with two decimals, and a little noise. */
async function writeFile(file: string, rows: number, endsAt: number): Promise<void> {
  const out = createWriteStream(file)
  out.write('time,temperature,humidity\n')
  for (let first = 0; first < rows; first += 10_000) {
    let text = ''
    for (let index = first; index < Math.min(rows, first + 10_000); index += 1) {
      const at = endsAt - (rows - index) * MINUTE
      const turn = Math.sin((at / 86_400_000) * 2 * Math.PI)
      const temp = 21 + 3 * turn + ((index * 7919) % 13) / 20
      text += `${new Date(at).toISOString().slice(0, 19)}Z,${temp.toFixed(2)},${(52 - 7 * turn + ((index * 104_729) % 11) / 10).toFixed(1)}\n`
    }
    if (!out.write(text)) await new Promise<void>((resolve) => out.once('drain', () => resolve()))
  }
  await new Promise<void>((resolve) => out.end(() => resolve()))
}

/** What the sqlite3 shell itself makes of the file: its own .import into a table of the same shape, on the same disk. */
function shellRate(folder: string, file: string, rows: number): number | null {
  if (spawnSync('sqlite3', ['--version']).error) return null
  const base = join(folder, 'shell.sqlite')
  const began = performance.now()
  execFileSync('sqlite3', [
    base,
    'PRAGMA journal_mode = WAL',
    'CREATE TABLE rows (time TEXT PRIMARY KEY, temperature REAL NOT NULL, humidity REAL NOT NULL) WITHOUT ROWID',
    '.mode csv',
    `.import --skip 1 ${file} rows`,
  ])
  return (1000 * rows) / (performance.now() - began)
}

function delaysOf(values: readonly number[]): Delays {
  const ordered = values.toSorted((one, other) => one - other)
  const at = (share: number) => ordered[Math.min(ordered.length - 1, Math.floor(ordered.length * share))] ?? 0
  return { median: at(0.5), p95: at(0.95), max: at(1), count: ordered.length }
}

/**
 * A million rows into the records through the worker's own code, in a process of its own, while dips are logged here: its rate beside the
 * shell's, and how long a dip takes with the import and without.
 */
async function measureUpload(folder: string, rows: number): Promise<UploadFigures> {
  const dataDir = mkdtempSync(join(folder, 'upload-'))
  process.env['DATA_DIR'] = dataDir
  const { migrate } = await import('@/db/migrator')
  await migrate(join(dataDir, 'kilnward.sqlite'))
  const { buildFoundry, buildRecipe, buildTree, dipBody } = await import('@/tests/factories/shell-room')
  const { seedMember, startProgram, testEnv } = await import('@/tests/setup/server')
  const { logDips } = await import('@/lib/commands/log-dips')
  const { newId } = await import('@/lib/core/ids')
  const { database, Upload } = await import('@/models')
  const clock = { now: () => Date.now() }
  const foundry = await buildFoundry()
  const member: SeededMember = await seedMember('supervisor')
  const recipeVersionId = await buildRecipe(foundry)

  const id = newId()
  mkdirSync(join(dataDir, 'uploads'))
  const file = join(dataDir, 'uploads', `${id}.rows`)
  await writeFile(file, rows, Date.now())
  const shellRowsPerSecond = shellRate(folder, file, rows)

  const dip = async (): Promise<number> => {
    const tree = await buildTree(foundry, { recipeVersionId, since: Date.now() - 3_600_000 })
    const body = dipBody(foundry, [{ treeId: tree.id, coatNumber: 1 }], { bathId: foundry.faceBathId, dippedAt: Date.now() - 1000 })
    const began = performance.now()
    await logDips(body, { member, clock })
    return performance.now() - began
  }
  // The first ones warm the program up.
  for (let count = 0; count < 10; count += 1) await dip()
  const calm: number[] = []
  for (let count = 0; count < CALM_DIPS; count += 1) {
    calm.push(await dip())
    await sleep(DIP_EVERY_MS)
  }

  const settings = {
    encoding: 'utf-8',
    delimiter: ',',
    hasDecimalComma: false,
    linesBefore: 1,
    dateColumn: 0,
    clockColumn: null,
    dateForm: 'ymd',
    zone: 'rows',
    tempColumn: 1,
    tempUnit: 'degC',
    humidityColumn: 2,
    pressureColumn: null,
    pressureUnit: 'hPa',
  }
  await Upload.create({
    id,
    sensorId: foundry.sensorId,
    fileName: 'a-million.csv',
    sha256: '0'.repeat(64),
    sizeBytes: statSync(file).size,
    state: 'waiting',
    settings: { settings, order: 'oldest first' },
    createdAt: Date.now(),
  })
  const worker = startProgram(['--import', 'tsx', 'jobs/worker.ts'], testEnv(dataDir))
  const during: number[] = []
  try {
    for (;;) {
      const upload = await Upload.findByPk(id, { rejectOnEmpty: true })
      if (upload.state === 'failed') throw new Error(upload.error ?? 'The upload failed.')
      if (upload.state === 'done') {
        if (upload.added !== rows) throw new Error(`${upload.added} of ${rows} rows came in.`)
        const seconds = ((upload.finishedAt ?? 0) - (upload.startedAt ?? 0)) / 1000
        const figures = { rows, rowsPerSecond: rows / seconds, shellRowsPerSecond, calm: delaysOf(calm), during: delaysOf(during) }
        return { ...figures, load: loadavg()[0]! }
      }
      if (upload.state === 'running') during.push(await dip())
      await sleep(DIP_EVERY_MS)
    }
  } finally {
    await worker.stop()
    await database.close()
    const handle = await openPlainHandle(join(dataDir, 'kilnward.sqlite'))
    await handle.close()
    rmSync(dataDir, { recursive: true, force: true })
  }
}

/** One line a figure. */
function linesOf({ rows, rowsPerSecond, shellRowsPerSecond, calm, during, load }: UploadFigures) {
  const milliseconds = ({ median, p95, max, count }: Delays) =>
    `${median.toFixed(0)}, ${p95.toFixed(0)}, ${max.toFixed(0)} ms (${count} dips)`
  const longer = during.p95 - calm.p95
  return [
    {
      what: `A file of ${rows.toLocaleString('en-GB')} rows, to the sqlite3 shell's .import`,
      value:
        shellRowsPerSecond === null
          ? `${rowsPerSecond.toFixed(0)} rows/s, shell not there`
          : `${rowsPerSecond.toFixed(0)}/s to ${shellRowsPerSecond.toFixed(0)}/s`,
      ratio: shellRowsPerSecond === null ? 0 : rowsPerSecond / shellRowsPerSecond,
      aim: 'shown',
      isMet: true,
      load,
    },
    { what: 'A dip without it: median, p95, max', value: milliseconds(calm), ratio: 1, aim: 'shown', isMet: true, load },
    {
      what: 'A dip while it is read: median, p95, max',
      value: milliseconds(during),
      ratio: during.median / calm.median,
      aim: 'p95 < 100 ms more',
      isMet: longer < 100,
      load,
    },
  ]
}

const folder = mkdtempSync(join(tmpdir(), 'kilnward-uploads-'))
try {
  process.stdout.write(`${JSON.stringify(linesOf(await measureUpload(folder, Number(process.argv[2] ?? 1_000_000))))}\n`)
} finally {
  rmSync(folder, { recursive: true, force: true })
}
