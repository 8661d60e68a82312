import { openTree } from '@/lib/commands/open-tree'
import { addTreeEvent } from '@/lib/commands/tree-event'
import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import { newId } from '@/lib/core/ids'
import type { Actor } from '@/lib/members/actor'
import { inTransaction, Place, TreePlace } from '@/models'

/**
 * Hangs a tree somewhere else, from now on; the newest coat's dose is split at this moment. The same place again changes nothing.
 *
 * @throws {AppError} not_found for the tree or the place; conflict when the tree has left the floor.
 */
export function moveTree(treeId: string, placeId: string, { member, clock }: { member: Actor; clock: Clock }): Promise<void> {
  return inTransaction(async () => {
    await openTree(treeId)
    const place = await Place.findByPk(placeId)
    if (!place || place.retiredAt !== null) throw new AppError('not_found', 'There is no such place.')
    const current = await TreePlace.findOne({
      where: { treeId, withdrawnAt: null },
      order: [
        ['since', 'DESC'],
        ['id', 'DESC'],
      ],
    })
    if (current?.placeId === placeId) return
    const now = clock.now()
    // A dip may stand up to two minutes ahead of us: the newest stay has to stay the last one.
    const since = Math.max(now, (current?.since ?? 0) + 1)
    await TreePlace.create({ id: newId(now), treeId, placeId, since, memberId: member.id })
    await addTreeEvent(treeId, 'moved', { by: member, at: now, text: `Moved to ${place.name}.`, placeId })
  })
}
