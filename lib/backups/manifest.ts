import { z } from 'zod'
import { BACKUP_KINDS, type BackupKind } from '@/lib/backups/backup-plan'

/** What lies beside each copy as .json: enough to check it when nothing else is left. */
export const backupManifest = z.object({
  fileName: z.string().regex(/^kilnward-[\w-]+\.sqlite$/),
  kind: z.enum(BACKUP_KINDS),
  startedAt: z.number().int().positive(),
  finishedAt: z.number().int().positive(),
  /** Zone of the foundry; null where none was set up. */
  timeZone: z.string().nullable(),
  sizeBytes: z.number().int().positive(),
  sha256: z.string().regex(/^[0-9a-f]{64}$/),
  migrations: z.array(z.string()),
  /** Rows of each table. */
  counts: z.record(z.string(), z.number().int().nonnegative()),
})
export type BackupManifest = z.infer<typeof backupManifest>

/**
 * Name of a copy; sorts by time, whatever the kind.
 *
 * @example backupFileName('before an upgrade', Date.parse('2026-12-01T14:33:20Z')) // => 'kilnward-2026-12-01T14-33-20Z-before-an-upgrade.sqlite'
 */
export function backupFileName(kind: BackupKind, at: number): string {
  const stamp = new Date(at).toISOString().slice(0, 19).replaceAll(':', '-')
  return `kilnward-${stamp}Z-${kind.replaceAll(' ', '-')}.sqlite`
}

/**
 * Tables whose number of rows is not what was written down, as sentences; empty when they agree.
 *
 * @example differingCounts({ coats: 4 }, { coats: 3 }) // => ['coats: 3 rows, 4 were written down']
 */
export function differingCounts(expected: Readonly<Record<string, number>>, found: Readonly<Record<string, number>>): string[] {
  const tables = [...new Set([...Object.keys(expected), ...Object.keys(found)])].toSorted()
  return tables
    .filter((table) => expected[table] !== found[table])
    .map((table) => `${table}: ${found[table] ?? 'no'} rows, ${expected[table] ?? 'none'} were written down`)
}
