import { Op } from 'sequelize'
import { JobRun } from '@/models'

/** The watch runs every minute; three missed ones are no accident. */
export const PULSE_MAX_AGE_MS = 3 * 60_000

/** When the worker last finished its look at the floor; null when it never has. */
export async function workerPulse(): Promise<number | null> {
  const run = await JobRun.findOne({ where: { job: 'watch-floor', finishedAt: { [Op.ne]: null } }, order: [['tickAt', 'DESC']] })
  return run?.finishedAt ?? null
}
