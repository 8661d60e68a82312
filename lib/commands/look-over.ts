import { openTree } from '@/lib/commands/open-tree'
import { addTreeEvent } from '@/lib/commands/tree-event'
import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import { newId } from '@/lib/core/ids'
import type { Actor } from '@/lib/members/actor'
import { Coat, inTransaction, LookOver, RecipeCoat } from '@/models'

/**
 * Records that somebody has looked a finished shell over and found no fault. A later coat asks for a new one.
 *
 * @throws {AppError} not_found; conflict when coats are still to come or the tree has left the floor.
 */
export function lookOver(treeId: string, note: string, { member, clock }: { member: Actor; clock: Clock }): Promise<void> {
  return inTransaction(async () => {
    const tree = await openTree(treeId)
    const newest = await Coat.findOne({ where: { treeId, withdrawnAt: null }, order: [['number', 'DESC']] })
    const coatCount = await RecipeCoat.count({ where: { recipeVersionId: tree.recipeVersionId } })
    if (!newest || newest.number < coatCount) {
      throw new AppError('conflict', `${tree.tag} has coats to come: it is looked over when the last one is on.`)
    }
    const now = clock.now()
    await LookOver.create({ id: newId(now), treeId, coatId: newest.id, note, memberId: member.id, lookedOverAt: now })
    await addTreeEvent(treeId, 'looked over', {
      memberId: member.id,
      at: now,
      text: `Looked over${note ? `: ${note}` : ', nothing found.'}`,
    })
  })
}
