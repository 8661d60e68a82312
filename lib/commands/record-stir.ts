import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import { newId } from '@/lib/core/ids'
import type { Actor } from '@/lib/members/actor'
import { Bath, BathStir, inTransaction } from '@/models'

/** Records that a bath was stirred now. @throws {AppError} not_found. */
export function recordStir(bathId: string, { member, clock }: { member: Actor; clock: Clock }): Promise<void> {
  return inTransaction(async () => {
    const bath = await Bath.findByPk(bathId)
    if (!bath || bath.retiredAt !== null) throw new AppError('not_found', 'There is no such bath.')
    const now = clock.now()
    await BathStir.create({ id: newId(now), bathId, stirredAt: now, memberId: member.id })
  })
}
