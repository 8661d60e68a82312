import { countTry, forgetTries } from '@/lib/commands/count-try'
import type { Clock } from '@/lib/core/clock'
import { newId } from '@/lib/core/ids'
import type { Role } from '@/lib/members/roles'
import { signInSubject } from '@/lib/members/sign-in-waits'
import { isPasswordRight } from '@/lib/server/password'
import { inTransaction, Member, Session } from '@/models'

/** A session ends this long after the sign-in, whatever happens in between. */
export const SESSION_MS = 12 * 3_600_000

export type SignInInput = {
  email: string
  password: string
  userAgent: string
  /** A device from which this member has signed in before; null for any other. */
  device: string | null
}

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
 * Growing waits follow repeated failures per e-mail, known or not, and hold for the right password too. A known device has its own,
 * so that no stranger who knows the e-mail can keep the member out.
 */
export async function signIn(input: SignInInput, { clock }: { clock: Clock }): Promise<SignInResult> {
  const email = input.email.trim().toLowerCase()
  const subject = signInSubject(email, input.device)
  const waitMs = await countTry(subject, clock.now())
  if (waitMs > 0) return { outcome: 'wait', waitSeconds: Math.ceil(waitMs / 1000) }

  const member = await Member.findOne({ where: { email } })
  const isRight = await isPasswordRight(input.password, member?.passwordHash ?? null)
  if (!member || !isRight || member.disabledAt !== null) return { outcome: 'refused' }

  const now = clock.now()
  const sessionId = newId(now)
  return inTransaction(async () => {
    // The hash took a while: meanwhile they may have been shut out, or been given another password.
    const row = await Member.findByPk(member.id)
    if (!row || row.passwordHash !== member.passwordHash || row.disabledAt !== null) return { outcome: 'refused' }
    if (row.firstPasswordUntil !== null && row.firstPasswordUntil <= now) return { outcome: 'first password over' }
    await forgetTries(subject)
    await row.update({ lastSignedInAt: now })
    await Session.create({
      id: sessionId,
      memberId: row.id,
      userAgent: input.userAgent.slice(0, 300),
      createdAt: now,
      expiresAt: now + SESSION_MS,
    })
    return { outcome: 'signed in', sessionId, member: { id: row.id, name: row.name, email: row.email, role: row.role } }
  })
}
