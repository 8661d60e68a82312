import type { Clock } from '@/lib/core/clock'
import { inTransaction, SensorToken } from '@/models'

/** Notes that a token was used just now. */
export async function stampSensorToken(tokenId: string, { clock }: { clock: Clock }): Promise<void> {
  await inTransaction(() => SensorToken.update({ lastUsedAt: clock.now() }, { where: { id: tokenId } }))
}
