import { endMemberSessions } from '@/lib/commands/end-member-sessions'
import { addFoundryEvent } from '@/lib/commands/foundry-event'
import { keepAnOwner } from '@/lib/commands/last-owner'
import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import type { Actor } from '@/lib/members/actor'
import { changedFields } from '@/lib/members/changed-fields'
import type { MemberInput } from '@/lib/members/member-input'
import { inTransaction, Member } from '@/models'

/**
 * Changes a member's name, e-mail and role. With another role their sessions end: what is open on a screen was drawn for the old one.
 *
 * @throws {AppError} not_found; conflict for the last owner, or with `fields` when somebody has this e-mail.
 */
export function editMember(memberId: string, input: MemberInput, { member, clock }: { member: Actor; clock: Clock }): Promise<void> {
  return inTransaction(async () => {
    const now = clock.now()
    const row = await Member.findByPk(memberId)
    if (!row) throw new AppError('not_found', 'There is no such member.')
    const { before, after } = changedFields({ name: row.name, email: row.email, role: row.role }, input)
    if (Object.keys(after).length === 0) return
    const known = await Member.findOne({ where: { email: input.email } })
    if (known && known.id !== memberId) {
      const reason = `${known.name} has this e-mail.`
      throw new AppError('conflict', reason, { fields: [{ path: 'email', message: reason }] })
    }
    const isOtherRole = input.role !== row.role
    if (isOtherRole) await keepAnOwner(row)
    await row.update({ name: input.name, email: input.email, role: input.role })
    if (isOtherRole) await endMemberSessions(memberId, { clock })
    const text = isOtherRole ? `${input.name} is now ${input.role}, was ${String(before['role'])}.` : `${input.name} changed.`
    await addFoundryEvent(
      { type: 'member', id: memberId, name: input.name },
      { kind: isOtherRole ? 'role changed' : 'member changed', by: member, at: now, text, before, after },
    )
  })
}
