import { browserName } from '@/lib/format/browser-name'
import type { Units } from '@/lib/format/units'
import type { Role } from '@/lib/members/roles'
import { Foundry, Session } from '@/models'

export type SessionMember = {
  id: string
  name: string
  email: string
  role: Role
  sessionId: string
  /** Browser and system of this session, in words. */
  device: string
  isDemo: boolean
  /** As the member wants to read them; where they have not said, as the foundry does. */
  units: Units
  /** Signed in with a password that somebody else has made: nothing is open but the page where they make their own. */
  mustChangePassword: boolean
  /** False until the owner has ended the first run: every page leads there. */
  isFoundrySetUp: boolean
}

/** A session that has not been ended, with what the clock decides still open. */
export type KnownSession = { member: SessionMember; expiresAt: number; firstPasswordUntil: number | null }

/** A session as the database knows it; null once it was ended or its member disabled. */
export async function loadSession(sessionId: string): Promise<KnownSession | null> {
  const session = await Session.findByPk(sessionId, { include: 'member' })
  const member = session?.member
  if (!session || !member || session.endedAt !== null || member.disabledAt !== null) return null
  const foundry = await Foundry.findByPk(1)
  return {
    expiresAt: session.expiresAt,
    firstPasswordUntil: member.firstPasswordUntil,
    member: {
      id: member.id,
      name: member.name,
      email: member.email,
      role: member.role,
      sessionId: session.id,
      device: browserName(session.userAgent),
      isDemo: member.isDemo,
      units: {
        temp: member.tempUnit ?? foundry?.tempUnit ?? 'degC',
        mass: member.massUnit ?? foundry?.massUnit ?? 'kg',
        length: member.lengthUnit ?? foundry?.lengthUnit ?? 'mm',
      },
      mustChangePassword: member.firstPasswordUntil !== null,
      isFoundrySetUp: typeof foundry?.setUpAt === 'number',
    },
  }
}

/** The member of a session at a moment; null once it has run out. */
export function memberAt(session: KnownSession | null, now: number): SessionMember | null {
  if (!session || session.expiresAt <= now) return null
  // A first password that has run out opens nothing any more, not even through the session it has opened.
  return session.firstPasswordUntil !== null && session.firstPasswordUntil <= now ? null : session.member
}
