import { CronJob } from 'cron'
import type { Job, JobContext } from '@/jobs/job'
import { runPass } from '@/jobs/run-pass'
import { log } from '@/lib/core/log'

/** A tick that comes late because the machine was busy is still worth running: the pass looks at what is true then. */
const LATE_MS = 60_000

/**
 * Runs each job by its schedule, in UTC so that no clock change skips or repeats a minute.
 *
 * @returns stops all of them and waits for the passes under way.
 */
export function startSchedule(jobs: readonly Job[], context: JobContext): () => Promise<void> {
  const timers = jobs.map((job) =>
    CronJob.from({
      name: job.name,
      cronTime: job.schedule,
      timeZone: 'UTC',
      threshold: LATE_MS,
      waitForCompletion: true,
      errorHandler: (error) => log('job.failed', { job: job.name, error: String(error) }),
      onTick: async () => {
        if (!context.isStopping()) await runPass(job, context)
      },
      start: true,
    }),
  )
  return async () => {
    const waits = timers.map((timer) => timer.stop() ?? Promise.resolve())
    await Promise.all(waits)
  }
}
