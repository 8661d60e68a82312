import type { Clock } from '@/lib/core/clock'
import type { Role } from '@/lib/members/roles'
import { Session } from '@/models'

export type SessionMember = { id: string; name: string; email: string; role: Role; sessionId: string }

/** The member behind a session as the database knows them now; null once it has ended, run out, or its member was disabled. */
export async function sessionMember(sessionId: string, { clock }: { clock: Clock }): Promise<SessionMember | null> {
  const session = await Session.findByPk(sessionId, { include: 'member' })
  const member = session?.member
  if (!session || !member || session.endedAt !== null || session.expiresAt <= clock.now() || member.disabledAt !== null) return null
  return { id: member.id, name: member.name, email: member.email, role: member.role, sessionId: session.id }
}
