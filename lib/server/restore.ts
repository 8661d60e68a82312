import { copyFile, chmod, mkdir, readdir, rename, rm, stat } from 'node:fs/promises'
import { basename, dirname, join } from 'node:path'
import { databaseFile } from '@/db/connection'
import { migrate, shippedMigrations } from '@/db/migrator'
import { examineDatabase, type Examination } from '@/db/snapshot'
import { formerRecords } from '@/lib/backups/former-records'
import type { BackupManifest } from '@/lib/backups/manifest'
import { keepBackups } from '@/lib/commands/keep-backups'
import { noteRestore } from '@/lib/commands/note-restore'
import type { Clock } from '@/lib/core/clock'
import { backupDir, dataDir } from '@/lib/core/env'
import { log } from '@/lib/core/log'
import { formatBytes } from '@/lib/format/bytes'
import { checkBackup, DamagedBackupError, listBackupFiles, readManifest, KEPT_SECRETS_FILE, SECRETS_FILE } from '@/lib/server/backup-files'
import { freeBytesOf, processesWithOpen, sizeOf, syncToDisk } from '@/lib/server/disk'

/** Nothing was changed; the message says why and what to do. */
export class RestoreRefusal extends Error {
  override readonly name = 'RestoreRefusal'
}

export type ChosenBackup = { file: string; manifest: BackupManifest | null; found: Examination }

export type Restored = {
  file: string
  /** Where the records of before lie now; null where there were none. */
  setAside: string | null
  /** Rows as they lie in the restored file, before anything was added to it. */
  counts: Record<string, number>
  newestEventAt: number | null
  migrated: string[]
  areSecretsRestored: boolean
}

/**
 * Finds a backup by its name, by a path, or by the word 'newest', and reads it through.
 *
 * @throws {RestoreRefusal} when there is none, or none that may be relied on.
 */
export async function chooseBackup(name: string): Promise<ChosenBackup> {
  const newest = name === 'newest' ? (await listBackupFiles(backupDir()))[0]?.fileName : name
  if (newest === undefined) throw new RestoreRefusal(`There is no backup in ${backupDir()}.`)
  const file = newest.includes('/') ? newest : join(backupDir(), newest)
  if ((await sizeOf(file)) === 0) throw new RestoreRefusal(`There is no backup ${file}. 'npm run restore' lists those that there are.`)
  const manifest = await readManifest(dirname(file), basename(file))
  const found = await checkBackup(file, manifest).catch((error: unknown) => {
    throw error instanceof DamagedBackupError ? new RestoreRefusal(`${basename(file)} cannot be used. ${error.message}`) : error
  })
  const shipped = await shippedMigrations()
  const newer = found.migrations.filter((migration) => !shipped.includes(migration))
  if (newer.length > 0) {
    throw new RestoreRefusal(
      `${basename(file)} was written by a newer Kilnward (${newer.join(', ')}). Restore it with that version or a later one.`,
    )
  }
  return { file, manifest, found }
}

/**
 * Puts a backup in the place of the records: copied and proved beside them first, then named. What lay there is moved into a
 * dated folder as a whole, -wal and -shm with it, since a -wal beside another file destroys that one. Nothing is deleted.
 *
 * @param options.maySetAside false refuses where records lie.
 * @throws {RestoreRefusal} when nothing was changed; {Error} when it stopped later, with where everything lies.
 */
export async function restoreBackup(
  { file, manifest }: ChosenBackup,
  { maySetAside, clock }: { maySetAside: boolean; clock: Clock },
): Promise<Restored> {
  const target = databaseFile()
  await mkdir(dirname(target), { recursive: true, mode: 0o700 })
  await refuseWhileOpen(target)
  const present = await presentFiles(target)
  if (present.length > 0 && !maySetAside) throw new RestoreRefusal(await presentWords(present))
  await refuseWithoutRoom(file, dirname(target))

  const arriving = `${target}.restoring`
  let found: Examination
  try {
    await copyFile(file, arriving)
    await chmod(arriving, 0o600)
    await syncToDisk(arriving)
    found = await checkBackup(arriving, manifest)
  } catch (error) {
    await rm(arriving, { force: true })
    throw new RestoreRefusal(`The copy into ${dirname(target)} failed. ${error instanceof Error ? error.message : String(error)}`)
  }

  const at = clock.now()
  const setAside =
    present.length > 0 ? join(dirname(target), `set-aside-${new Date(at).toISOString().slice(0, 19).replaceAll(':', '-')}Z`) : null
  try {
    if (setAside) await moveAll(present, setAside)
    await rename(arriving, target)
    await syncToDisk(dirname(target))
    const areSecretsRestored = await restoreSecrets()
    const migrated = await migrate(target)
    await noteRestore({ fileName: basename(file), backupAt: manifest?.startedAt ?? null }, { clock })
    // The records know of the copy that they come from only as begun. The worker does the same; it need not be done twice.
    await keepBackups({ clock }).catch((error: unknown) => log('backup.list-not-kept', { error: String(error) }))
    const { faults, brokenReferences } = await examineDatabase(target)
    if (faults.length > 0 || brokenReferences > 0) throw new Error(faults[0] ?? `${brokenReferences} references lead nowhere.`)
    return { file: target, setAside, counts: found.counts, newestEventAt: found.newestEventAt, migrated, areSecretsRestored }
  } catch (error) {
    await rm(arriving, { force: true }).catch(() => {})
    const where = setAside === null ? '' : ` ${await formerWords(present, setAside)}`
    throw new Error(`The restore stopped: ${error instanceof Error ? error.message : String(error)}.${where} The backup was not touched.`, {
      cause: error,
    })
  }
}

async function refuseWhileOpen(target: string): Promise<void> {
  const holders = await processesWithOpen(target)
  if (holders.length > 0) throw new RestoreRefusal(`${target} is open in process ${holders.join(', ')}. Stop that first.`)
}

/** The records and what belongs to them. */
async function presentFiles(target: string): Promise<string[]> {
  const names = await readdir(dirname(target))
  const own = ['', '-wal', '-shm', '-journal'].map((ending) => `${basename(target)}${ending}`)
  return own.filter((name) => names.includes(name)).map((name) => join(dirname(target), name))
}

async function presentWords(present: readonly string[]): Promise<string> {
  const listed = await Promise.all(present.map(async (file) => `${basename(file)} (${formatBytes((await stat(file)).size)})`))
  const hasWal = present.some((file) => file.endsWith('-wal'))
  return [
    `${dirname(present[0]!)} holds records: ${listed.join(', ')}.`,
    ...(hasWal ? ['The -wal belongs to them and would destroy any other file put beside it.'] : []),
    'Add --set-aside, and they are moved together into a dated folder there first; nothing is deleted. So far nothing was changed.',
  ].join(' ')
}

async function refuseWithoutRoom(file: string, folder: string): Promise<void> {
  const [needed, free] = await Promise.all([sizeOf(file), freeBytesOf(folder)])
  if (needed * 1.1 > free) {
    throw new RestoreRefusal(`${folder} has no room: ${formatBytes(needed)} are needed, ${formatBytes(free)} are free.`)
  }
}

async function moveAll(files: readonly string[], folder: string): Promise<void> {
  await mkdir(folder, { mode: 0o700 })
  for (const file of files) await rename(file, join(folder, basename(file)))
  await syncToDisk(folder)
}

async function formerWords(present: readonly string[], aside: string): Promise<string> {
  const there = await readdir(aside).catch((): string[] => [])
  const names = present.map((file) => basename(file))
  const [moved, left] = [names.filter((name) => there.includes(name)), names.filter((name) => !there.includes(name))]
  return formerRecords({ moved, left, folder: dirname(present[0]!), aside })
}

/** A data folder that has lost its secrets gets those of the backups; its own are left as they are. */
async function restoreSecrets(): Promise<boolean> {
  const [own, kept] = [join(dataDir(), SECRETS_FILE), join(backupDir(), KEPT_SECRETS_FILE)]
  if ((await sizeOf(own)) > 0 || (await sizeOf(kept)) === 0) return false
  await copyFile(kept, own)
  await chmod(own, 0o600)
  return true
}
