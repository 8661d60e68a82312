import type { Job } from '@/jobs/job'
import { pruneRecords } from '@/lib/commands/prune-records'
import { pruneUploads } from '@/lib/commands/prune-uploads'

/** Hourly, because a foundry's machine may be off every night; away from the full hour at which other work begins. */
export const prune: Job = {
  name: 'prune',
  schedule: '0 17 * * * *',
  run: async ({ clock }) => ({ ...(await pruneRecords({ clock })), ...(await pruneUploads({ clock })) }),
}
