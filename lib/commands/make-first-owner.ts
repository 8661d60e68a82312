import { addFoundryEvent } from '@/lib/commands/foundry-event'
import { refuseField } from '@/lib/commands/refuse-field'
import { SESSION_MS } from '@/lib/commands/sign-in'
import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import { newId } from '@/lib/core/ids'
import { isTimeZone } from '@/lib/foundry/time-zones'
import type { FirstOwnerInput } from '@/lib/members/first-owner-input'
import { hashPassword } from '@/lib/server/password'
import { isSetupCodeRight } from '@/lib/server/setup-code'
import { Foundry, inTransaction, Member, Session } from '@/models'

/** What the foundry is called until its owner says so. */
const NAMELESS = 'Our foundry'

/**
 * Makes the owner's account and the foundry that it owns, in records in which nobody is a member: once, and never again.
 * They are signed in with it at once.
 *
 * @param by.scryptCost a test may lower it.
 * @throws {AppError} conflict when somebody is a member, with `fields` for a wrong setup code; too_many_requests.
 */
export async function makeFirstOwner(
  input: FirstOwnerInput,
  { userAgent, clock, scryptCost }: { userAgent: string; clock: Clock; scryptCost?: number },
): Promise<{ memberId: string; sessionId: string }> {
  if (!(await isSetupCodeRight(input.setupCode))) refuseField('setupCode', 'This is not the code that the start has printed.')
  const passwordHash = await hashPassword(input.password, scryptCost)
  return inTransaction(async () => {
    // Two may have come at once. The transaction holds the write lock from its first line, so that the second one sees the first.
    if ((await Member.count()) > 0) throw new AppError('conflict', 'The owner’s account has been made already. Sign in, or ask the owner.')
    const now = clock.now()
    const timeZone = isTimeZone(input.timeZone) ? input.timeZone : 'UTC'
    await Foundry.create({ id: 1, name: NAMELESS, timeZone, altitudeM: 0, createdAt: now })
    const { name, email } = input
    const owner = { id: newId(now), name, role: 'owner' as const }
    await Member.create({ ...owner, email, passwordHash, lastSignedInAt: now, createdAt: now })
    await addFoundryEvent(
      { type: 'member', id: owner.id, name },
      { kind: 'owner made', by: owner, at: now, text: `${name} made the owner’s account.`, after: { name, email, role: owner.role } },
    )
    const sessionId = newId(now)
    await Session.create({
      id: sessionId,
      memberId: owner.id,
      userAgent: userAgent.slice(0, 300),
      createdAt: now,
      expiresAt: now + SESSION_MS,
    })
    return { memberId: owner.id, sessionId }
  })
}
