import type { Model } from 'sequelize'
import type { Actor } from '@/lib/members/actor'

/**
 * Takes the demo's mark from a row that somebody of this foundry has changed: it is theirs now, and the demo's removal leaves it.
 * What the row stands on in turn, such as a place's sensor, the removal finds by itself. Takes part in the caller's transaction.
 */
export async function stopBeingDemo(row: Model & { isDemo: boolean }, member: Actor): Promise<void> {
  if (row.isDemo && !member.isDemo) await row.update({ isDemo: false })
}
