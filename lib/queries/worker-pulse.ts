import { JobRun } from '@/models'

/** The worker writes a pass every minute; after three without one nobody is told anything. */
const PULSE_LIMIT_MS = 3 * 60_000

/** When the worker last finished its pass over the floor, and whether that is recent enough to rely on. */
export async function workerPulse(now: number): Promise<{ pulseAt: number | null; isAlive: boolean }> {
  const run = await JobRun.findOne({ where: { job: 'watch-floor', outcome: 'done' }, order: [['tickAt', 'DESC']] })
  const pulseAt = run?.finishedAt ?? null
  return { pulseAt, isAlive: pulseAt !== null && now - pulseAt < PULSE_LIMIT_MS }
}
