import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import { inTransaction, Tree, TreeWatch } from '@/models'

/**
 * 'Tell me when dry': the member hears of this tree from now on.
 *
 * @throws {AppError} not_found.
 */
export async function watchTree(treeId: string, { memberId, clock }: { memberId: string; clock: Clock }): Promise<void> {
  await inTransaction(async () => {
    if (!(await Tree.findByPk(treeId, { attributes: ['id'] }))) throw new AppError('not_found', 'There is no such tree.')
    await TreeWatch.findOrCreate({ where: { treeId, memberId }, defaults: { treeId, memberId, createdAt: clock.now() } })
  })
}

/** Ends it. Without effect where the member did not watch. */
export async function unwatchTree(treeId: string, { memberId }: { memberId: string }): Promise<void> {
  await inTransaction(() => TreeWatch.destroy({ where: { treeId, memberId } }))
}
