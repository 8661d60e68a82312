import { Op } from 'sequelize'
import type { Clock } from '@/lib/core/clock'
import { log } from '@/lib/core/log'
import { inTransaction, JobRun } from '@/models'

const MINUTE_MS = 60_000

export type Tick = { tickAt: number; missedMinutes: number }

/**
 * Claims this minute for a job. The row is unique, so of two workers one gets it.
 *
 * @returns null when the minute is taken.
 */
export function claimTick(job: string, { clock }: { clock: Clock }): Promise<Tick | null> {
  return inTransaction(async () => {
    const now = clock.now()
    const tickAt = Math.floor(now / MINUTE_MS) * MINUTE_MS
    const last = await JobRun.max<number | null, JobRun>('tickAt', { where: { job } })
    if (last !== null && last > tickAt + MINUTE_MS) {
      // The clock was set back: minutes that have not come yet must not count as done, or nobody would watch until they have.
      await JobRun.destroy({ where: { job, tickAt: { [Op.gte]: tickAt } } })
      log('job.clock-set-back', { job, minutes: (last - tickAt) / MINUTE_MS })
    } else if (last !== null && last >= tickAt) {
      return null
    }
    await JobRun.create({ job, tickAt, startedAt: now })
    const isAhead = last === null || last > tickAt
    return { tickAt, missedMinutes: isAhead ? 0 : (tickAt - last) / MINUTE_MS - 1 }
  })
}

/** Writes down how a claimed pass ended. */
export async function finishTick(
  job: string,
  { tickAt }: Tick,
  result: { outcome: 'done' | 'failed'; detail: Record<string, unknown> },
  { clock }: { clock: Clock },
): Promise<void> {
  await inTransaction(() => JobRun.update({ ...result, finishedAt: clock.now() }, { where: { job, tickAt } }))
}
