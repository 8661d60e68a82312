import type { BackupKind } from '@/lib/backups/backup-plan'
import { Backup, FoundryEvent } from '@/models'

export type BackupRow = {
  id: string
  kind: BackupKind
  at: number
  outcome: 'done' | 'failed' | 'under way'
  sizeBytes: number | null
  provenAt: number | null
  error: string | null
}

const ROWS = 12

/** The newest copies that lie there, and newer tries that failed; newest first. */
export async function loadBackupList(): Promise<BackupRow[]> {
  const rows = await Backup.findAll({ where: { removedAt: null }, order: [['startedAt', 'DESC']], limit: ROWS })
  return rows.map(({ id, kind, startedAt, outcome, sizeBytes, provenAt, error }) => ({
    id,
    kind,
    at: startedAt,
    outcome: outcome ?? 'under way',
    sizeBytes,
    provenAt,
    error,
  }))
}

/** The last time that a backup was put in the place of the records; null where none was. */
export async function loadLastRestore(): Promise<{ at: number; fileName: string; text: string } | null> {
  const event = await FoundryEvent.findOne({ where: { kind: 'backup restored' }, order: [['id', 'DESC']] })
  if (!event) return null
  const { text } = event.detail
  return { at: event.at, fileName: event.subjectName, text: typeof text === 'string' ? text : '' }
}

/** The file of the newest copy that may be relied on; null where there is none. */
export async function newestBackupFile(): Promise<string | null> {
  const newest = await Backup.findOne({ where: { outcome: 'done', removedAt: null }, order: [['startedAt', 'DESC']] })
  return newest?.fileName ?? null
}
