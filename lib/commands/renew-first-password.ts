import { forgetMemberTries } from '@/lib/commands/count-try'
import { endMemberSessions } from '@/lib/commands/end-member-sessions'
import { addFoundryEvent } from '@/lib/commands/foundry-event'
import { keepAnOwner } from '@/lib/commands/last-owner'
import { refuseDemoPerson } from '@/lib/commands/refuse-demo-person'
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
 * @param by.member null: somebody at the machine itself, who may do so for the last owner too.
 * @returns the first password itself, for this one time; only its hash is kept.
 * @throws {AppError} not_found; conflict for oneself, who has a page for it, for a disabled member, for one of a laid
 * demo's people, and for the last owner with a password of their own: two who renew each other at once come one after the other.
 */
export async function renewFirstPassword(
  memberId: string,
  { member, clock }: { member: Actor | null; clock: Clock },
): Promise<{ firstPassword: string }> {
  if (memberId === member?.id) throw new AppError('conflict', 'Your own password is changed on your own page.')
  const firstPassword = makeFirstPassword()
  const passwordHash = await hashPassword(firstPassword)
  await inTransaction(async () => {
    const now = clock.now()
    const row = await Member.findByPk(memberId)
    if (!row) throw new AppError('not_found', 'There is no such member.')
    await refuseDemoPerson(row)
    if (row.disabledAt !== null) throw new AppError('conflict', `${row.name} is disabled. Enable them first.`)
    if (member && row.firstPasswordUntil === null) await keepAnOwner(row)
    await row.update({ passwordHash, firstPasswordUntil: now + FIRST_PASSWORD_MS })
    await endMemberSessions(memberId, { clock })
    await forgetMemberTries(row)
    await addFoundryEvent(
      { type: 'member', id: memberId, name: row.name },
      {
        kind: 'first password made',
        by: member,
        at: now,
        text: `New first password for ${row.name}${member ? '' : ', made on the machine itself'}.`,
      },
    )
  })
  return { firstPassword }
}
