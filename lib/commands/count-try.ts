import { Op } from 'sequelize'
import { FORGET_FAILURES_AFTER_MS, signInSubject, waitAfterFailuresMs } from '@/lib/members/sign-in-waits'
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

/** Takes every count of a member away, at the sign-in from wherever and at the change of password. Takes part in the caller's transaction. */
export async function forgetMemberTries({ id, email }: { id: string; email: string }): Promise<void> {
  const strangers = signInSubject(email, null)
  // ';' follows ':', so between them lies what begins with the e-mail and a device. A LIKE would take '_' for any letter.
  const devices = { [Op.gte]: `${strangers}:`, [Op.lt]: `${strangers};` }
  const subject = { [Op.or]: [{ [Op.in]: [strangers, `password:${id}`] }, devices] }
  await inTransaction(() => SignInWait.destroy({ where: { subject } }))
}
