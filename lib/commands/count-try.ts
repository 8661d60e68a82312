import { Op } from 'sequelize'
import { FORGET_FAILURES_AFTER_MS, waitAfterFailuresMs } from '@/lib/members/sign-in-waits'
import { inTransaction, SignInWait } from '@/models'

/**
 * Counts a try at a password as failed before the password is looked at, so that a hundred tries at once still make a hundred;
 * a success takes the count away again.
 *
 * @param subject whose password is tried, and where: each has its own count.
 * @returns how long to wait, ms; 0 when the try may go on.
 */
export function countTry(subject: string, now: number): Promise<number> {
  return inTransaction(async () => {
    await SignInWait.destroy({ where: { lastFailedAt: { [Op.lte]: now - FORGET_FAILURES_AFTER_MS } } })
    const row = await SignInWait.findByPk(subject)
    if (row && row.waitUntil > now) return row.waitUntil - now
    const failures = (row?.failures ?? 0) + 1
    await SignInWait.upsert({ subject, failures, lastFailedAt: now, waitUntil: now + waitAfterFailuresMs(failures) })
    return 0
  })
}

/** Takes the count away after the right password. Takes part in the caller's transaction. */
export async function forgetTries(subject: string): Promise<void> {
  await inTransaction(() => SignInWait.destroy({ where: { subject } }))
}
