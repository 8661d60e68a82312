import type { Clock } from '@/lib/core/clock'
import { inTransaction, Session } from '@/models'

/** Ends one session: from now on its cookie is worth nothing, copied or not. */
export async function endSession(sessionId: string, { clock }: { clock: Clock }): Promise<void> {
  await inTransaction(() => Session.update({ endedAt: clock.now() }, { where: { id: sessionId, endedAt: null } }))
}
