import { basename } from 'node:path'
import { systemClock } from '@/lib/core/clock'
import { backupDir } from '@/lib/core/env'
import { formatBytes } from '@/lib/format/bytes'
import { formatDate, formatClock } from '@/lib/format/local-time'
import { listBackupFiles } from '@/lib/server/backup-files'
import { closeRecords } from '@/lib/server/records'
import { chooseBackup, restoreBackup, RestoreRefusal } from '@/lib/server/restore'

// Run by restore.mjs, which holds the data folder meanwhile. Ends with 0: done; 1: refused, nothing was changed; 2: stopped later.

function say(line = ''): void {
  process.stdout.write(`${line}\n`)
}

const momentIn = (timeZone: string | null) => (at: number) =>
  timeZone === null
    ? new Date(at).toISOString()
    : `${formatDate(at, timeZone)} ${new Date(at).getUTCFullYear()} ${formatClock(at, timeZone)} (${timeZone})`

async function list(): Promise<void> {
  const backups = await listBackupFiles(backupDir())
  if (backups.length === 0) throw new RestoreRefusal(`There is no backup in ${backupDir()}.`)
  say(`Backups in ${backupDir()}, newest first:`)
  for (const { fileName, startedAt, timeZone, sizeBytes } of backups) {
    say(`  ${fileName}  ${momentIn(timeZone)(startedAt)}  ${formatBytes(sizeBytes)}`)
  }
  say()
  say('Restore one with: npm run restore -- NAME (or newest, or the path of a file)')
}

async function restore(name: string, maySetAside: boolean): Promise<void> {
  const chosen = await chooseBackup(name)
  const moment = momentIn(chosen.found.timeZone)
  const { manifest } = chosen
  say(
    `${basename(chosen.file)} is sound.${manifest ? ` Made ${moment(manifest.startedAt)}.` : ' No sum lies beside it to hold it against.'}`,
  )
  const restored = await restoreBackup(chosen, { maySetAside, clock: systemClock })
  await closeRecords()
  const tables = Object.entries(restored.counts)
  const width = Math.max(...tables.map(([table]) => table.length), 5)
  say()
  say(`${'Table'.padEnd(width)}  ${'backup'.padStart(9)}  ${'restored'.padStart(9)}`)
  for (const [table, rows] of tables) {
    const written = manifest ? String(manifest.counts[table] ?? 0) : 'unknown'
    say(`${table.padEnd(width)}  ${written.padStart(9)}  ${String(rows).padStart(9)}`)
  }
  say()
  if (restored.newestEventAt !== null) say(`The newest line of a tree's history is of ${moment(restored.newestEventAt)}.`)
  if (restored.migrated.length > 0) say(`Brought up to this version: ${restored.migrated.join(', ')}.`)
  if (restored.areSecretsRestored) say('The secrets were put back from beside the backups.')
  if (restored.setAside) say(`The records of before lie in ${restored.setAside}. Delete them when you are sure.`)
  say('Tokens revoked, members disabled and passwords changed after this backup are as they were then. Do again what must hold.')
  say(`Restored and proved: ${restored.file}. Start Kilnward; everybody signs in again.`)
}

const [name, ...flags] = process.argv.slice(2)
try {
  if (name === undefined) await list()
  else await restore(name, flags.includes('--set-aside'))
} catch (error) {
  const isRefusal = error instanceof RestoreRefusal
  process.stderr.write(`${isRefusal || error instanceof Error ? error.message : String(error)}\n`)
  process.exitCode = isRefusal ? 1 : 2
}
