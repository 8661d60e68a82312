import { openTree } from '@/lib/commands/open-tree'
import { addTreeEvent } from '@/lib/commands/tree-event'
import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import { newId } from '@/lib/core/ids'
import type { Actor } from '@/lib/members/actor'
import { Hold, inTransaction, Member } from '@/models'

type By = { member: Actor; clock: Clock }

/**
 * Holds a tree: no dip is offered until somebody allowed lifts it.
 *
 * @throws {AppError} not_found; conflict when it is held already or has left the floor.
 */
export function holdTree(treeId: string, reason: string, { member, clock }: By): Promise<{ holdId: string }> {
  return inTransaction(async () => {
    const tree = await openTree(treeId)
    const open = await Hold.findOne({ where: { treeId, liftedAt: null } })
    if (open) {
      const holder = await Member.findByPk(open.heldBy)
      throw new AppError('conflict', `${tree.tag} is held already${holder ? ` by ${holder.name}` : ''}: ${open.reason}`)
    }
    const now = clock.now()
    const hold = await Hold.create({ id: newId(now), treeId, reason, heldBy: member.id, heldAt: now })
    await addTreeEvent(treeId, 'held', { by: member, at: now, text: `Held: ${reason}` })
    return { holdId: hold.id }
  })
}

/**
 * Lifts the open hold of a tree, with a reason.
 *
 * @throws {AppError} not_found; conflict when it is not held or has left the floor.
 */
export function liftHold(treeId: string, reason: string, { member, clock }: By): Promise<void> {
  return inTransaction(async () => {
    const tree = await openTree(treeId)
    const open = await Hold.findOne({ where: { treeId, liftedAt: null } })
    if (!open) throw new AppError('conflict', `${tree.tag} is not held.`)
    const now = clock.now()
    await open.update({ liftedBy: member.id, liftedAt: now, liftReason: reason })
    await addTreeEvent(treeId, 'hold lifted', { by: member, at: now, text: `Hold lifted: ${reason}` })
  })
}
