import { addFoundryEvent } from '@/lib/commands/foundry-event'
import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import type { Actor } from '@/lib/members/actor'
import { inTransaction, SensorToken } from '@/models'

/**
 * Makes a token worthless at once. A second time changes nothing.
 *
 * @throws {AppError} not_found.
 */
export async function revokeSensorToken(
  input: { tokenId: string },
  { member, clock }: { member: Actor | null; clock: Clock },
): Promise<void> {
  await inTransaction(async () => {
    const token = await SensorToken.findByPk(input.tokenId, { include: 'sensor' })
    if (!token) throw new AppError('not_found', 'There is no such token.')
    if (token.revokedAt !== null) return
    const now = clock.now()
    await token.update({ revokedAt: now })
    const name = token.sensor?.name ?? ''
    await addFoundryEvent(
      { type: 'sensor', id: String(token.sensorId), name },
      { kind: 'token revoked', by: member, at: now, text: `Token ${token.id} of ${name} revoked.` },
    )
  })
}
