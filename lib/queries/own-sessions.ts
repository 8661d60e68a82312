import { Op } from 'sequelize'
import type { Clock } from '@/lib/core/clock'
import { Session } from '@/models'

export type OwnSession = { id: string; userAgent: string; createdAt: number; expiresAt: number }

/** Where a member is signed in now, newest first. */
export async function ownSessions(memberId: string, { clock }: { clock: Clock }): Promise<OwnSession[]> {
  const rows = await Session.findAll({
    where: { memberId, endedAt: null, expiresAt: { [Op.gt]: clock.now() } },
    order: [['createdAt', 'DESC']],
  })
  return rows.map(({ id, userAgent, createdAt, expiresAt }) => ({ id, userAgent, createdAt, expiresAt }))
}
