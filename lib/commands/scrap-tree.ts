import { openTree } from '@/lib/commands/open-tree'
import { addTreeEvent } from '@/lib/commands/tree-event'
import type { Clock } from '@/lib/core/clock'
import type { Actor } from '@/lib/members/actor'
import { inTransaction } from '@/models'

/** Takes a tree off the floor for good, with a reason. Its history stays. @throws {AppError} not_found, conflict. */
export function scrapTree(treeId: string, reason: string, { member, clock }: { member: Actor; clock: Clock }): Promise<void> {
  return inTransaction(async () => {
    const tree = await openTree(treeId)
    const now = clock.now()
    await tree.update({ scrappedAt: now, updatedAt: now })
    await addTreeEvent(treeId, 'scrapped', { by: member, at: now, text: `Scrapped: ${reason}` })
  })
}
