import { countTry, forgetTries } from '@/lib/commands/count-try'
import type { Clock } from '@/lib/core/clock'
import { newId } from '@/lib/core/ids'
import type { Role } from '@/lib/members/roles'
import { isPasswordRight } from '@/lib/server/password'
import { inTransaction, Member, Session } from '@/models'

/** A session ends this long after the sign-in, whatever happens in between. */
export const SESSION_MS = 12 * 3_600_000

export type SignInInput = { email: string; password: string; userAgent: string }

export type SignInResult =
  | { outcome: 'signed in'; sessionId: string; member: { id: string; name: string; email: string; role: Role } }
  /** Unknown, disabled or wrong: the caller cannot tell which. */
  | { outcome: 'refused' }
  /** The right password, but one that was good for a day and has run out. */
  | { outcome: 'first password over' }
  | { outcome: 'wait'; waitSeconds: number }

/**
 * Checks an e-mail and password and opens a session of twelve hours.
 *
 * Growing waits follow repeated failures per e-mail, known or not, and hold for the right password too.
 */
export async function signIn(input: SignInInput, { clock }: { clock: Clock }): Promise<SignInResult> {
  const email = input.email.trim().toLowerCase()
  const subject = `member:${email}`
  const waitMs = await countTry(subject, clock.now())
  if (waitMs > 0) return { outcome: 'wait', waitSeconds: Math.ceil(waitMs / 1000) }

  const member = await Member.findOne({ where: { email } })
  const isRight = await isPasswordRight(input.password, member?.passwordHash ?? null)
  if (!member || !isRight || member.disabledAt !== null) return { outcome: 'refused' }

  const now = clock.now()
  if (member.firstPasswordUntil !== null && member.firstPasswordUntil <= now) return { outcome: 'first password over' }
  const sessionId = newId(now)
  await inTransaction(async () => {
    await forgetTries(subject)
    await member.update({ lastSignedInAt: now })
    await Session.create({
      id: sessionId,
      memberId: member.id,
      userAgent: input.userAgent.slice(0, 300),
      createdAt: now,
      expiresAt: now + SESSION_MS,
    })
  })
  return { outcome: 'signed in', sessionId, member: { id: member.id, name: member.name, email: member.email, role: member.role } }
}
