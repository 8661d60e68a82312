import { endMemberSessions } from '@/lib/commands/end-member-sessions'
import { forgetTries } from '@/lib/commands/count-try'
import { addFoundryEvent } from '@/lib/commands/foundry-event'
import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import type { Actor } from '@/lib/members/actor'
import { FIRST_PASSWORD_MS } from '@/lib/members/first-password'
import { makeFirstPassword } from '@/lib/server/first-password'
import { hashPassword } from '@/lib/server/password'
import { inTransaction, Member } from '@/models'

/**
 * A new first password for a member who forgot theirs, or whose first one has run out. Their sessions end, and so do their waits
 * at the sign-in.
 *
 * @returns the first password itself, for this one time; only its hash is kept.
 * @throws {AppError} not_found; conflict for oneself, who has a page for it, and for a disabled member.
 */
export async function renewFirstPassword(
  memberId: string,
  { member, clock }: { member: Actor; clock: Clock },
): Promise<{ firstPassword: string }> {
  if (memberId === member.id) throw new AppError('conflict', 'Your own password is changed on your own page.')
  const firstPassword = makeFirstPassword()
  const passwordHash = await hashPassword(firstPassword)
  await inTransaction(async () => {
    const now = clock.now()
    const row = await Member.findByPk(memberId)
    if (!row) throw new AppError('not_found', 'There is no such member.')
    if (row.disabledAt !== null) throw new AppError('conflict', `${row.name} is disabled. Enable them first.`)
    await row.update({ passwordHash, firstPasswordUntil: now + FIRST_PASSWORD_MS })
    await endMemberSessions(memberId, { clock })
    await forgetTries(`member:${row.email}`)
    await forgetTries(`password:${row.id}`)
    await addFoundryEvent(
      { type: 'member', id: memberId, name: row.name },
      { kind: 'first password made', by: member, at: now, text: `New first password for ${row.name}.` },
    )
  })
  return { firstPassword }
}
