import { millisecondsInHour } from 'date-fns/constants'
import { localDay } from '@/lib/format/local-time'

/** Why a copy was made; how long it is kept follows from it. As the CHECK of the table has them. */
export const BACKUP_KINDS = ['hourly', 'daily', 'monthly', 'by hand', 'before an upgrade'] as const
export type BackupKind = (typeof BACKUP_KINDS)[number]

/** How many of each kind stay; an older one goes when a newer one has come. */
export const BACKUPS_KEPT = {
  hourly: 24,
  daily: 14,
  monthly: 12,
  'by hand': 10,
  'before an upgrade': 5,
} as const satisfies Record<BackupKind, number>

/** Copies that did not pass their proof stay for a look, and keep no sound one from its place. */
const DAMAGED_KEPT = 3

/** A copy that lies in the folder. */
export type StandingBackup = {
  fileName: string
  kind: BackupKind
  startedAt: number
  /** False once its proof has failed. */
  isSound: boolean
}

const hourOf = (at: number) => Math.floor(at / millisecondsInHour)

/**
 * Which copy is to be made now, by what lies there and never by the hand of the clock: a machine that was off all night
 * makes last night's when it is on again.
 *
 * The first of a local month is kept as monthly, the first of a local day as daily; it stands for that hour, too. Hours are
 * counted in UTC, so a clock change neither skips nor doubles one.
 *
 * @param lastTriedAt when a planned copy was last begun and failed: not again within that hour.
 */
export function backupDue(
  standing: readonly StandingBackup[],
  { now, timeZone, lastTriedAt }: { now: number; timeZone: string; lastTriedAt: number | null },
): 'hourly' | 'daily' | 'monthly' | null {
  if (lastTriedAt !== null && hourOf(lastTriedAt) === hourOf(now)) return null
  const today = localDay(now, timeZone)
  const sound = standing.filter(({ isSound }) => isSound)
  const daysOf = (...kinds: BackupKind[]) =>
    sound.filter(({ kind }) => kinds.includes(kind)).map(({ startedAt }) => localDay(startedAt, timeZone))
  if (!daysOf('monthly').some((day) => day.slice(0, 7) === today.slice(0, 7))) return 'monthly'
  if (!daysOf('monthly', 'daily').includes(today)) return 'daily'
  const planned = sound.filter(({ kind }) => kind === 'hourly' || kind === 'daily' || kind === 'monthly')
  return planned.some(({ startedAt }) => hourOf(startedAt) === hourOf(now)) ? null : 'hourly'
}

/**
 * The copies that go. Of each kind the newest stay; one that is dated ahead of the clock counts as the oldest, since the
 * clock was wrong when it was made and it would keep every new one out.
 */
export function backupsToRemove(standing: readonly StandingBackup[], now: number): StandingBackup[] {
  const age = ({ startedAt }: StandingBackup) => (startedAt > now + millisecondsInHour ? Infinity : now - startedAt)
  const beyond = (group: StandingBackup[], kept: number) => group.toSorted((one, other) => age(one) - age(other)).slice(kept)
  return [
    ...BACKUP_KINDS.flatMap((kind) =>
      beyond(
        standing.filter((backup) => backup.kind === kind && backup.isSound),
        BACKUPS_KEPT[kind],
      ),
    ),
    ...beyond(
      standing.filter(({ isSound }) => !isSound),
      DAMAGED_KEPT,
    ),
  ]
}

/** Whether the newest copy still has to be restored for a try today. */
export function isProofDue(lastProvenAt: number | null, { now, timeZone }: { now: number; timeZone: string }): boolean {
  return lastProvenAt === null || localDay(lastProvenAt, timeZone) !== localDay(now, timeZone)
}

/** What has to stay free for the records themselves: a copy must never be what fills their disk. */
const ROOM_LEFT_BYTES = 100 * 1024 * 1024

/** Bytes that are missing before a copy may be made; 0 when there is room. */
export function missingRoom({ sizeBytes, freeBytes }: { sizeBytes: number; freeBytes: number }): number {
  return Math.max(0, Math.round(sizeBytes * 1.1) + ROOM_LEFT_BYTES - freeBytes)
}
