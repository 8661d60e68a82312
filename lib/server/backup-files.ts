import { copyFile, chmod, mkdir, mkdtemp, readdir, readFile, rename, rm, stat, writeFile } from 'node:fs/promises'
import { join } from 'node:path'
import { databaseFile } from '@/db/connection'
import { examineDatabase, takeSnapshot, type Examination } from '@/db/snapshot'
import { missingRoom, type BackupKind } from '@/lib/backups/backup-plan'
import { backupFileName, backupManifest, differingCounts, type BackupManifest } from '@/lib/backups/manifest'
import type { Clock } from '@/lib/core/clock'
import { newId } from '@/lib/core/ids'
import { formatBytes } from '@/lib/format/bytes'
import { freeBytesOf, sha256OfFile, sizeOf, syncToDisk } from '@/lib/server/disk'
import { storageTrouble } from '@/lib/server/problem'

/** Beside the copies: without it a restored foundry has other push keys, and every device has to turn its notices on again. */
export const KEPT_SECRETS_FILE = 'kilnward-secrets.json'
/** The same in the data folder, where the start script makes it. */
export const SECRETS_FILE = 'secrets.json'
const UNFINISHED = '.tmp'
const PROOF = 'kilnward-proof-'
/** Names that only Kilnward gives: the folder may hold other people's files. */
const LEFTOVER = /^kilnward-(?:[\w-]+\.sqlite\.[\w-]+\.tmp(?:-journal)?|secrets\.json\.tmp|proof-[A-Za-z0-9]{6})$/
const LEFTOVER_AFTER_MS = 3_600_000

/** A copy could not be made or tried; the message is a sentence for the owner. */
export class BackupError extends Error {
  override readonly name: string = 'BackupError'
}

/** A copy must not be relied on. */
export class DamagedBackupError extends BackupError {
  override readonly name = 'DamagedBackupError'
}

export type WriteBackupParts = {
  kind: BackupKind
  startedAt: number
  folder: string
  clock: Clock
  /** For a test of what a full disk leaves. */
  snapshot?: typeof takeSnapshot
}

/**
 * Makes one copy: under a name of its own, read through, written down to the disk, and only then named as a backup.
 * Others may write to the records meanwhile. Whatever goes wrong, no half file is left.
 *
 * @throws {BackupError} with what is wrong and what to do.
 */
export async function writeBackup(parts: WriteBackupParts): Promise<BackupManifest> {
  const { kind, startedAt, folder, clock, snapshot = takeSnapshot } = parts
  const from = databaseFile()
  const fileName = backupFileName(kind, startedAt)
  const unfinished = join(folder, `${fileName}.${newId(startedAt)}${UNFINISHED}`)
  try {
    await mkdir(folder, { recursive: true, mode: 0o700 })
    await refuseWithoutRoom(from, folder)
    await snapshot(from, unfinished)
    await chmod(unfinished, 0o600)
    const { faults, brokenReferences, counts, migrations, timeZone } = await examineDatabase(unfinished)
    if (faults.length > 0 || brokenReferences > 0) {
      throw new BackupError(`The copy is not sound: ${faults[0] ?? `${brokenReferences} references lead nowhere`}.`)
    }
    await syncToDisk(unfinished)
    const sums = { sizeBytes: await sizeOf(unfinished), sha256: await sha256OfFile(unfinished) }
    const manifest = { fileName, kind, startedAt, finishedAt: clock.now(), timeZone, ...sums, migrations, counts }
    // First, so that no copy ever stands without its sum.
    await writeWhole(join(folder, `${fileName}.json`), `${JSON.stringify(manifest, null, 2)}\n`)
    await rename(unfinished, join(folder, fileName))
    await syncToDisk(folder)
    return manifest
  } catch (error) {
    await removeQuietly(unfinished, `${unfinished}-journal`)
    throw error instanceof BackupError ? error : new BackupError(troubleWords(error, folder), { cause: error })
  }
}

async function refuseWithoutRoom(from: string, folder: string): Promise<void> {
  const [records, wal, freeBytes] = await Promise.all([sizeOf(from), sizeOf(`${from}-wal`), freeBytesOf(folder)])
  const missing = missingRoom({ sizeBytes: records + wal, freeBytes })
  if (missing > 0) {
    throw new BackupError(
      `There is no room for another copy in ${folder}: ${formatBytes(missing)} more must be free. Free some, or set BACKUP_DIR to a folder on another disk.`,
    )
  }
}

function troubleWords(error: unknown, folder: string): string {
  const code = error instanceof Error && 'code' in error ? String(error.code) : ''
  if (storageTrouble(error) === 'full' || code === 'ENOSPC') return `The disk of ${folder} is full. Free some space.`
  if (/^(EACCES|EPERM|EROFS|ENOTDIR|EEXIST)$/.test(code)) {
    return `Kilnward cannot write to ${folder} (${code}). Let it, or set BACKUP_DIR to another folder.`
  }
  return `The copy failed: ${error instanceof Error ? error.message : String(error)}`
}

/** Puts a small file in place as a whole or not at all, for its owner's eyes only. */
async function writeWhole(file: string, text: string): Promise<void> {
  await writeFile(`${file}${UNFINISHED}`, text, { mode: 0o600 })
  await syncToDisk(`${file}${UNFINISHED}`)
  await rename(`${file}${UNFINISHED}`, file)
}

async function removeQuietly(...files: string[]): Promise<void> {
  for (const file of files) await rm(file, { recursive: true, force: true }).catch(() => {})
}

const namesIn = (folder: string): Promise<string[]> =>
  readdir(folder).catch((error: NodeJS.ErrnoException) => {
    if (error.code === 'ENOENT') return []
    throw error
  })

/** What is written down about one copy; null where nothing is, or nothing that can be read. */
export async function readManifest(folder: string, fileName: string): Promise<BackupManifest | null> {
  try {
    return backupManifest.parse(JSON.parse(await readFile(join(folder, `${fileName}.json`), 'utf8')))
  } catch {
    return null
  }
}

/** Every copy in a folder that has its sum beside it, newest first. */
export async function listBackupFiles(folder: string): Promise<BackupManifest[]> {
  const names = (await namesIn(folder)).filter((name) => name.endsWith('.sqlite'))
  const manifests = await Promise.all(names.map((name) => readManifest(folder, name)))
  return manifests.filter((manifest) => manifest !== null).toSorted((one, other) => other.startedAt - one.startedAt)
}

/** Takes a copy and its sum away. */
export async function removeBackupFile(folder: string, fileName: string): Promise<void> {
  await rm(join(folder, fileName), { force: true })
  await rm(join(folder, `${fileName}.json`), { force: true })
}

/** Takes away what a copy or a proof left behind when the program was ended in the middle. */
export async function sweepBackupFolder(folder: string, now: number): Promise<void> {
  for (const name of await namesIn(folder)) {
    if (!LEFTOVER.test(name)) continue
    const { mtimeMs } = await stat(join(folder, name))
    if (now - mtimeMs > LEFTOVER_AFTER_MS) await removeQuietly(join(folder, name))
  }
}

/** Keeps one copy of the secrets beside the backups, readable for their owner only. */
export async function keepSecrets(dataFolder: string, folder: string): Promise<void> {
  const secrets = await readFile(join(dataFolder, SECRETS_FILE), 'utf8').catch(() => null)
  if (secrets === null) return
  const kept = await readFile(join(folder, KEPT_SECRETS_FILE), 'utf8').catch(() => null)
  if (kept !== secrets) await writeWhole(join(folder, KEPT_SECRETS_FILE), secrets)
}

/**
 * Reads a copy through and holds it against what was written down when it was made.
 *
 * @param manifest null for a copy that came without one: then its own soundness is all that can be checked.
 * @throws {DamagedBackupError} when it must not be relied on.
 */
export async function checkBackup(file: string, manifest: BackupManifest | null): Promise<Examination> {
  if (manifest && (await sha256OfFile(file)) !== manifest.sha256) {
    throw new DamagedBackupError('It is not the file that was written then: its sum is another. The disk or a transfer has changed it.')
  }
  const found = await examineDatabase(file).catch((error: unknown) => {
    throw new DamagedBackupError(`It cannot be opened as a database (${error instanceof Error ? error.message : String(error)}).`)
  })
  if (found.faults.length > 0) throw new DamagedBackupError(`It is damaged: ${found.faults[0]}.`)
  if (found.brokenReferences > 0) throw new DamagedBackupError(`It is damaged: ${found.brokenReferences} references lead nowhere.`)
  if (!('foundry' in found.counts)) throw new DamagedBackupError('It is a database, but not one of Kilnward.')
  const differing = manifest ? differingCounts(manifest.counts, found.counts) : []
  if (differing.length > 0) throw new DamagedBackupError(`It does not hold what was written down: ${differing.slice(0, 3).join('; ')}.`)
  return found
}

/**
 * Restores a copy for a try: into a folder of its own, where it is checked as a real restore would, and taken away again.
 *
 * @throws {DamagedBackupError} when the copy would be no help; {BackupError} when there is no room to try it.
 */
export async function proveBackup(folder: string, manifest: BackupManifest): Promise<void> {
  const place = await mkdtemp(join(folder, PROOF))
  try {
    await refuseWithoutRoom(join(folder, manifest.fileName), folder)
    const restored = join(place, 'kilnward.sqlite')
    await copyFile(join(folder, manifest.fileName), restored)
    await checkBackup(restored, manifest)
  } finally {
    await removeQuietly(place)
  }
}
