import type { Job, JobContext } from '@/jobs/job'
import { claimTick, finishTick } from '@/lib/commands/claim-tick'
import { reasonOf, traceOf } from '@/lib/core/errors'
import { log } from '@/lib/core/log'

/**
 * One pass of a job over this minute, with its row in job_runs; then the jobs that follow it.
 * Never throws: the next minute makes up for a failed one.
 *
 * @returns 'taken' when another worker, or this one, has done the minute already.
 */
export async function runPass(job: Job, context: JobContext): Promise<'done' | 'failed' | 'taken'> {
  try {
    const tick = await claimTick(job.name, context)
    if (!tick) return 'taken'
    if (tick.missedMinutes > 0) log('job.minutes-missed', { job: job.name, minutes: tick.missedMinutes })
    const result = await attempt(job, context)
    const detail = { ...result.detail, ...(tick.missedMinutes > 0 && { missedMinutes: tick.missedMinutes }) }
    await finishTick(job.name, tick, { outcome: result.outcome, detail }, context)
    if (result.outcome === 'done') {
      for (const next of job.followedBy ?? []) await attempt(next, context)
    }
    return result.outcome
  } catch (error) {
    log('job.unrecorded', { job: job.name, error: reasonOf(error) })
    return 'failed'
  }
}

async function attempt(job: Job, context: JobContext): Promise<{ outcome: 'done' | 'failed'; detail: Record<string, unknown> }> {
  try {
    return { outcome: 'done', detail: await job.run(context) }
  } catch (error) {
    log('job.failed', { job: job.name, error: traceOf(error) })
    return { outcome: 'failed', detail: { error: reasonOf(error).slice(0, 300) } }
  }
}
