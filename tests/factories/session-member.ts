import type { Clock } from '@/lib/core/clock'
import { loadSession, memberAt, type SessionMember } from '@/lib/queries/session-member'

/** The member behind a session at a moment, as each request asks for it. */
export async function sessionMember(sessionId: string, { clock }: { clock: Clock }): Promise<SessionMember | null> {
  return memberAt(await loadSession(sessionId), clock.now())
}
