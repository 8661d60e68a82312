import type { Clock } from '@/lib/core/clock'
import { inTransaction, Session } from '@/models'

/** Ends every session of a member, for a new password or a disablement. Takes part in the caller's transaction. */
export async function endMemberSessions(memberId: string, { clock }: { clock: Clock }): Promise<void> {
  await inTransaction(() => Session.update({ endedAt: clock.now() }, { where: { memberId, endedAt: null } }))
}
