import { addFoundryEvent } from '@/lib/commands/foundry-event'
import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import { newId } from '@/lib/core/ids'
import type { Actor } from '@/lib/members/actor'
import { FIRST_PASSWORD_MS } from '@/lib/members/first-password'
import type { MemberInput } from '@/lib/members/member-input'
import { makeFirstPassword } from '@/lib/server/first-password'
import { hashPassword } from '@/lib/server/password'
import { inTransaction, Member } from '@/models'

/**
 * Adds a member with a random first password, good for a day and for one thing: making their own.
 *
 * @returns the first password itself, for this one time; only its hash is kept.
 * @throws {AppError} conflict with `fields` when somebody has this e-mail, or had it: members are disabled, never deleted.
 */
export async function addMember(
  input: MemberInput,
  { member, clock }: { member: Actor; clock: Clock },
): Promise<{ memberId: string; firstPassword: string }> {
  const firstPassword = makeFirstPassword()
  const passwordHash = await hashPassword(firstPassword)
  const memberId = await inTransaction(async () => {
    const now = clock.now()
    const email = input.email.trim().toLowerCase()
    const known = await Member.findOne({ where: { email } })
    if (known) {
      const reason = `${known.name} has this e-mail${known.disabledAt === null ? '' : ' and is disabled: enable them instead'}.`
      throw new AppError('conflict', reason, { fields: [{ path: 'email', message: reason }] })
    }
    const id = newId(now)
    const { name, role } = input
    await Member.create({
      id,
      name,
      email,
      role,
      passwordHash,
      firstPasswordUntil: now + FIRST_PASSWORD_MS,
      isDemo: member.isDemo ?? false,
      createdAt: now,
    })
    await addFoundryEvent(
      { type: 'member', id, name },
      { kind: 'member added', by: member, at: now, text: `${name} added as ${role}.`, after: { name, email, role } },
    )
    return id
  })
  return { memberId, firstPassword }
}
