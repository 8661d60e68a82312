import { Op } from 'sequelize'
import type { Clock } from '@/lib/core/clock'
import { inTransaction, JobRun, Session, SignInWait } from '@/models'

const DAY_MS = 86_400_000
const JOB_RUNS_KEPT_MS = 14 * DAY_MS
/** Kept for a while, so that a person can see on their page where they were signed in. */
const SESSIONS_KEPT_MS = 30 * DAY_MS
const WAITS_KEPT_MS = DAY_MS

/** Takes away what nobody looks at any more: old passes, sessions long over, waits long served. What happened on the floor stays. */
export function pruneRecords({ clock }: { clock: Clock }): Promise<{ jobRuns: number; sessions: number; waits: number }> {
  return inTransaction(async () => {
    const now = clock.now()
    const oldSession = { [Op.lt]: now - SESSIONS_KEPT_MS }
    return {
      jobRuns: await JobRun.destroy({ where: { startedAt: { [Op.lt]: now - JOB_RUNS_KEPT_MS } } }),
      sessions: await Session.destroy({ where: { [Op.or]: [{ endedAt: oldSession }, { expiresAt: oldSession }] } }),
      waits: await SignInWait.destroy({
        where: { waitUntil: { [Op.lt]: now - WAITS_KEPT_MS }, lastFailedAt: { [Op.lt]: now - WAITS_KEPT_MS } },
      }),
    }
  })
}
