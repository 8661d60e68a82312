import type { Clock } from '@/lib/core/clock'
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

/** The member behind a session as the database knows them now; null once it has ended, run out, or its member was disabled. */
export async function sessionMember(sessionId: string, { clock }: { clock: Clock }): Promise<SessionMember | null> {
  const session = await Session.findByPk(sessionId, { include: 'member' })
  const member = session?.member
  if (!session || !member || session.endedAt !== null || session.expiresAt <= clock.now() || member.disabledAt !== null) return null
  // A first password that has run out opens nothing any more, not even through the session it has opened.
  if (member.firstPasswordUntil !== null && member.firstPasswordUntil <= clock.now()) return null
  const foundry = await Foundry.findByPk(1)
  return {
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
  }
}
