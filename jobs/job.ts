import type { Clock } from '@/lib/core/clock'

export type JobContext = {
  clock: Clock
  /** True once the worker has been asked to stop: finish what is begun and begin nothing. */
  isStopping: () => boolean
}

/** A piece of work that looks at what is true now: a pass more or less changes nothing. */
export type Job = {
  name: string
  /** Six fields, UTC. At most one pass per minute. */
  schedule: string
  /** @returns what the pass did, for its row in job_runs. */
  run: (context: JobContext) => Promise<Record<string, unknown>>
  /** Jobs that follow right after a pass, as sending follows the look at the floor. */
  followedBy?: readonly Job[]
}
