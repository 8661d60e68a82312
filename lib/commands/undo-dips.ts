import { UNDO_MS } from '@/lib/coats/undo-window'
import type { UndoDips } from '@/lib/coats/dip-contract'
import { reopenCoat } from '@/lib/commands/close-coat'
import { runOperation } from '@/lib/commands/run-operation'
import { addTreeEvent } from '@/lib/commands/tree-event'
import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import type { Actor } from '@/lib/members/actor'
import { may } from '@/lib/members/roles'
import { Coat, Tree, TreePlace } from '@/models'

/**
 * Takes coats back: they are withdrawn, never deleted, and the coat below dries on from its own dip.
 * All of them or none.
 *
 * @throws {AppError} not_found; forbidden after ten minutes or for another's dip (a supervisor may, with a reason);
 *   conflict when a coat is not the newest of its tree, or the tree has left the floor.
 */
export function undoDips(input: UndoDips, { member, clock }: { member: Actor; clock: Clock }) {
  return runOperation({ operationId: input.operationId, kind: 'undo dips', memberId: member.id, body: input, clock }, async () => {
    const now = clock.now()
    const taken: { coatId: string; treeId: string; number: number }[] = []
    for (const coatId of input.coatIds) taken.push(await takeBack(coatId, input.reason, member, now))
    return { status: 200, response: { operationId: input.operationId, coats: taken } }
  })
}

async function takeBack(coatId: string, reason: string | undefined, member: Actor, now: number) {
  const coat = await Coat.findByPk(coatId)
  if (!coat) throw new AppError('not_found', 'There is no such coat.', { coatId })
  const tree = await Tree.findByPk(coat.treeId, { rejectOnEmpty: true })
  if (coat.withdrawnAt !== null) throw new AppError('conflict', `Coat ${coat.number} of ${tree.tag} was taken back already.`)
  if (tree.releasedAt !== null || tree.scrappedAt !== null) {
    throw new AppError('conflict', `${tree.tag} has left the floor: its coats stand.`)
  }
  const newest = await Coat.findOne({ where: { treeId: coat.treeId, withdrawnAt: null }, order: [['number', 'DESC']] })
  if (newest?.id !== coat.id) {
    throw new AppError('conflict', `Coat ${coat.number} of ${tree.tag} is not the newest: take back coat ${newest?.number} first.`)
  }
  const isOwnAndFresh = coat.loggedBy === member.id && now - coat.loggedAt <= UNDO_MS
  if (!isOwnAndFresh) {
    if (!may(member.role, 'correct')) {
      throw new AppError('forbidden', 'Ten minutes are over, or somebody else logged it: ask a supervisor to take it back.')
    }
    if (!reason) {
      throw new AppError('unprocessable', 'Say why this coat is taken back.', {
        fields: [{ path: 'reason', message: 'Say why in a few words.' }],
      })
    }
  }
  await coat.update({ withdrawnAt: now, withdrawnBy: member.id, withdrawnReason: reason ?? null })
  await TreePlace.update(
    { withdrawnAt: now },
    { where: { treeId: coat.treeId, placeId: coat.placeId, since: coat.dippedAt, withdrawnAt: null } },
  )
  const below = await Coat.findOne({ where: { treeId: coat.treeId, number: coat.number - 1, withdrawnAt: null } })
  if (below) await reopenCoat(below.id)
  await addTreeEvent(coat.treeId, 'coat taken back', {
    by: member,
    at: now,
    text: `Coat ${coat.number} taken back${reason ? `: ${reason}` : ''}.`,
    coatId: coat.id,
  })
  return { coatId: coat.id, treeId: coat.treeId, number: coat.number }
}
