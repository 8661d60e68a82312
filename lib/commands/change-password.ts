import { countTry, forgetMemberTries } from '@/lib/commands/count-try'
import { endMemberSessions } from '@/lib/commands/end-member-sessions'
import { addFoundryEvent } from '@/lib/commands/foundry-event'
import { refuseField } from '@/lib/commands/refuse-field'
import { SESSION_MS } from '@/lib/commands/sign-in'
import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import { newId } from '@/lib/core/ids'
import type { Actor } from '@/lib/members/actor'
import { passwordProblem } from '@/lib/members/password-rules'
import { hashPassword, isPasswordRight } from '@/lib/server/password'
import { inTransaction, Member, Session } from '@/models'

export type PasswordChange = { currentPassword: string; newPassword: string }

/**
 * Changes the member's own password. Every session ends, the one that asked too, so that a copied cookie is worth nothing
 * afterwards; a new one is opened in its place. Wrong tries at the present password wait as those of the sign-in do.
 *
 * @returns the new session, for the browser that asked.
 * @throws {AppError} conflict, with `fields` for a wrong one; too_many_requests.
 */
export async function changePassword(
  { currentPassword, newPassword }: PasswordChange,
  { member, clock }: { member: Actor & { email: string; sessionId: string }; clock: Clock },
): Promise<{ sessionId: string }> {
  const problem = passwordProblem(newPassword, member)
  if (problem !== null) refuseField('newPassword', problem)
  const subject = `password:${member.id}`
  const waitMs = await countTry(subject, clock.now())
  if (waitMs > 0) {
    const seconds = Math.ceil(waitMs / 1000)
    throw new AppError('too_many_requests', `Too many tries. Wait ${seconds} s, then try again.`, { retryAfterSeconds: seconds })
  }
  const { passwordHash } = await Member.findByPk(member.id, { rejectOnEmpty: true })
  if (!(await isPasswordRight(currentPassword, passwordHash))) refuseField('currentPassword', 'This is not the password that you have now.')
  const isSame = currentPassword.normalize('NFC') === newPassword.normalize('NFC')
  if (isSame) refuseField('newPassword', 'This is the password that you have now.')
  const newHash = await hashPassword(newPassword)
  return inTransaction(async () => {
    const now = clock.now()
    const row = await Member.findByPk(member.id, { rejectOnEmpty: true })
    if (row.passwordHash !== passwordHash || row.disabledAt !== null) {
      throw new AppError('conflict', 'Your password was changed elsewhere meanwhile. Sign in again.')
    }
    const asking = await Session.findByPk(member.sessionId)
    const isFirst = row.firstPasswordUntil !== null
    await row.update({ passwordHash: newHash, firstPasswordUntil: null })
    await forgetMemberTries(row)
    await endMemberSessions(member.id, { clock })
    const sessionId = newId(now)
    await Session.create({
      id: sessionId,
      memberId: member.id,
      userAgent: asking?.userAgent ?? '',
      createdAt: now,
      expiresAt: now + SESSION_MS,
    })
    await addFoundryEvent(
      { type: 'member', id: row.id, name: row.name },
      {
        kind: 'password changed',
        by: member,
        at: now,
        text: isFirst ? `${row.name} made their own password.` : `${row.name} changed their password.`,
      },
    )
    return { sessionId }
  })
}
