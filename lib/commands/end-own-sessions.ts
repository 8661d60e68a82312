import { Op } from 'sequelize'
import type { Clock } from '@/lib/core/clock'
import { inTransaction, Session } from '@/models'

type Own = { member: { id: string; sessionId: string }; clock: Clock }

/** Ends one of the member's own sessions. Without effect on somebody else's, or on one that has ended. */
export async function endOwnSession(sessionId: string, { member, clock }: Own): Promise<void> {
  await inTransaction(() => Session.update({ endedAt: clock.now() }, { where: { id: sessionId, memberId: member.id, endedAt: null } }))
}

/** Ends all of the member's sessions but the one that asks. */
export async function endOtherSessions({ member, clock }: Own): Promise<void> {
  await inTransaction(() =>
    Session.update({ endedAt: clock.now() }, { where: { memberId: member.id, endedAt: null, id: { [Op.ne]: member.sessionId } } }),
  )
}
