import { endMemberSessions } from '@/lib/commands/end-member-sessions'
import { addFoundryEvent } from '@/lib/commands/foundry-event'
import { keepAnOwner } from '@/lib/commands/last-owner'
import { refuseDemoPerson } from '@/lib/commands/refuse-demo-person'
import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import type { Actor } from '@/lib/members/actor'
import { Delivery, inTransaction, Member, PushSubscription, TreeWatch } from '@/models'

type By = { member: Actor; clock: Clock }

/**
 * Shuts a member out: sessions end, devices and watched trees are taken off the list, and what was still to be sent to them is not.
 * What they have done stays under their name. Without effect on a member who is disabled already.
 *
 * @throws {AppError} not_found; conflict for the last owner.
 */
export function disableMember(memberId: string, { member, clock }: By): Promise<void> {
  return inTransaction(async () => {
    const now = clock.now()
    const row = await findMember(memberId)
    if (row.disabledAt !== null) return
    await keepAnOwner(row)
    await row.update({ disabledAt: now })
    await endMemberSessions(memberId, { clock })
    await PushSubscription.destroy({ where: { memberId } })
    await TreeWatch.destroy({ where: { memberId } })
    await Delivery.update({ status: 'gone', leaseUntil: null }, { where: { memberId, status: 'waiting' } })
    await addFoundryEvent(
      { type: 'member', id: memberId, name: row.name },
      { kind: 'member disabled', by: member, at: now, text: `${row.name} disabled.` },
    )
  })
}

/**
 * Lets a disabled member in again, with the password they had. Without effect on one who is not disabled.
 *
 * @throws {AppError} not_found; conflict for one of the people of a demo that was laid over this foundry.
 */
export function enableMember(memberId: string, { member, clock }: By): Promise<void> {
  return inTransaction(async () => {
    const row = await findMember(memberId)
    if (row.disabledAt === null) return
    await refuseDemoPerson(row)
    await row.update({ disabledAt: null })
    await addFoundryEvent(
      { type: 'member', id: memberId, name: row.name },
      { kind: 'member enabled', by: member, at: clock.now(), text: `${row.name} enabled again.` },
    )
  })
}

async function findMember(memberId: string): Promise<Member> {
  const row = await Member.findByPk(memberId)
  if (!row) throw new AppError('not_found', 'There is no such member.')
  return row
}
