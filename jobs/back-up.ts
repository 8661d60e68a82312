import type { Job } from '@/jobs/job'
import { backupDue, isProofDue } from '@/lib/backups/backup-plan'
import { keepBackups } from '@/lib/commands/keep-backups'
import { makeBackup } from '@/lib/commands/make-backup'
import { proveNewestBackup } from '@/lib/commands/prove-newest-backup'
import { hasFoundry } from '@/lib/queries/has-foundry'
import { lastBackupTimes } from '@/lib/queries/last-backup-times'
import { loadFoundry } from '@/lib/queries/load-foundry'

/** Every ten minutes: makes the copy that is due by what lies there, takes old ones away, and restores the newest for a try once a day. */
export const backUp: Job = {
  name: 'back-up',
  schedule: '20 */10 * * * *',
  run: async ({ clock, isStopping }) => {
    if (!(await hasFoundry())) return { isEmpty: true }
    const { timeZone } = await loadFoundry()
    const before = await keepBackups({ clock })
    const { failedAt, provenAt } = await lastBackupTimes()
    const kind = backupDue(before.standing, { now: clock.now(), timeZone, lastTriedAt: failedAt })
    if (kind) await makeBackup(kind, { member: null, clock })
    const { standing, removed } = kind ? await keepBackups({ clock }) : before
    if (isStopping() || !isProofDue(provenAt, { now: clock.now(), timeZone })) return { made: kind, removed }
    return { made: kind, removed, proved: await proveNewestBackup(standing, { clock }) }
  },
}
