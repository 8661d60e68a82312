import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import { inTransaction, SensorToken } from '@/models'

/**
 * Makes a token worthless at once. A second time changes nothing.
 *
 * @throws {AppError} not_found.
 */
export async function revokeSensorToken(input: { tokenId: string }, { clock }: { clock: Clock }): Promise<void> {
  await inTransaction(async () => {
    const token = await SensorToken.findByPk(input.tokenId)
    if (!token) throw new AppError('not_found', 'There is no such token.')
    if (token.revokedAt === null) await token.update({ revokedAt: clock.now() })
  })
}
