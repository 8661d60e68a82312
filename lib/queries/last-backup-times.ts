import { Backup } from '@/models'

/** When a planned copy last failed, and when one was last restored for a try. */
export async function lastBackupTimes(): Promise<{ failedAt: number | null; provenAt: number | null }> {
  const failedAt = await Backup.max<number | null, Backup>('startedAt', {
    where: { outcome: 'failed', kind: ['hourly', 'daily', 'monthly'] },
  })
  const provenAt = await Backup.max<number | null, Backup>('provenAt')
  return { failedAt, provenAt }
}
