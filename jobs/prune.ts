import type { Job } from '@/jobs/job'
import { pruneRecords } from '@/lib/commands/prune-records'

/** Daily, away from the full hour at which other work begins. */
export const prune: Job = {
  name: 'prune',
  schedule: '0 17 2 * * *',
  run: ({ clock }) => pruneRecords({ clock }),
}
