import { openTree } from '@/lib/commands/open-tree'
import { addTreeEvent } from '@/lib/commands/tree-event'
import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import { newId } from '@/lib/core/ids'
import type { Actor } from '@/lib/members/actor'
import { loadFloor } from '@/lib/queries/floor'
import { CoatLook, inTransaction } from '@/models'

/**
 * Records 'looks dry' or 'not yet' on the newest coat, with the clock's own forecast at this moment beside it.
 * 'Looks dry' lets a person dip; the newest word stands.
 *
 * @throws {AppError} not_found; conflict when there is no coat on or the tree has left the floor.
 */
export function recordLook(
  treeId: string,
  verdict: 'looks dry' | 'not yet',
  { member, clock }: { member: Actor; clock: Clock },
): Promise<void> {
  return inTransaction(async () => {
    const tree = await openTree(treeId)
    const now = clock.now()
    const [derived] = (await loadFloor({ now, trees: { ids: [treeId] } })).trees
    if (!derived?.newest || !derived.call) throw new AppError('conflict', `${tree.tag} has no coat on yet.`)
    await CoatLook.create({
      id: newId(now),
      coatId: derived.newest.id,
      verdict,
      lookedAt: now,
      memberId: member.id,
      moistureRatio: derived.call.moistureRatio,
      forecastP10At: derived.call.earliestAt,
      forecastP50At: derived.call.likelyAt,
      forecastP90At: derived.call.safeAt,
    })
    await addTreeEvent(treeId, 'looked at', {
      by: member,
      at: now,
      text: `Coat ${derived.newest.number}: ${verdict}.`,
      coatId: derived.newest.id,
    })
  })
}
