import { openTree } from '@/lib/commands/open-tree'
import { addTreeEvent } from '@/lib/commands/tree-event'
import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import { newId } from '@/lib/core/ids'
import type { Actor } from '@/lib/members/actor'
import { loadFloor } from '@/lib/queries/floor'
import { isDriedOut } from '@/lib/trees/assess'
import { inTransaction, LookOver } from '@/models'

/**
 * Records that somebody has looked a finished shell over and found no fault. A later coat asks for a new one, and a look at a shell
 * that was not dried out yet is kept but does not count: cracks come while it dries.
 *
 * @throws {AppError} not_found; conflict when coats are still to come or the tree has left the floor.
 */
export function lookOver(treeId: string, note: string, { member, clock }: { member: Actor; clock: Clock }): Promise<void> {
  return inTransaction(async () => {
    const tree = await openTree(treeId)
    const now = clock.now()
    const [derived] = (await loadFloor({ now, trees: { ids: [treeId] } })).trees
    if (!derived?.newest || !derived.isLastOn) {
      throw new AppError('conflict', `${tree.tag} has coats to come: it is looked over when the last one is on.`)
    }
    const wasDriedOut = derived.call !== null && isDriedOut(derived.facts, derived.call)
    await LookOver.create({ id: newId(now), treeId, coatId: derived.newest.id, note, wasDriedOut, memberId: member.id, lookedOverAt: now })
    await addTreeEvent(treeId, 'looked over', {
      by: member,
      at: now,
      text: `Looked over${wasDriedOut ? '' : ' while it was still drying out'}${note ? `: ${note}` : ', nothing found.'}`,
    })
  })
}
