import { closeCoat, reopenCoat } from '@/lib/commands/close-coat'
import { addTreeEvent } from '@/lib/commands/tree-event'
import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import { newId } from '@/lib/core/ids'
import type { Actor } from '@/lib/members/actor'
import { loadFloor } from '@/lib/queries/floor'
import { needsConfirmation, releaseChecks } from '@/lib/trees/release-checks'
import type { Confirmation } from '@/lib/trees/tree-input'
import { Coat, inTransaction, Release, Tree } from '@/models'

type By = { member: Actor; clock: Clock }

/**
 * Releases finished shells to burnout: all of them or none. They leave the floor; their coats stand from now on.
 *
 * @throws {AppError} not_found; conflict that names the first open check of each tree.
 */
export function releaseTrees(
  treeIds: readonly string[],
  { confirmations }: { confirmations: Readonly<Record<string, Confirmation | null>> },
  { member, clock }: By,
): Promise<void> {
  return inTransaction(async () => {
    const now = clock.now()
    const { trees, context } = await loadFloor({ now, trees: { ids: treeIds } })
    if (trees.length < new Set(treeIds).size) throw new AppError('not_found', 'There is no such tree.')
    const open = trees.flatMap((tree) => {
      if (tree.facts.releasedAt !== null || tree.facts.scrappedAt !== null) return [`${tree.facts.tag} has left the floor.`]
      return releaseChecks(tree, confirmations[tree.facts.id] ?? null)
        .filter((check) => !check.isMet)
        .slice(0, 1)
        .map((check) => `${tree.facts.tag}: ${check.text}`)
    })
    if (open.length > 0) throw new AppError('conflict', `Nothing was released. ${open.join(' ')}`)
    for (const tree of trees) {
      const treeId = tree.facts.id
      const confirmedBy = needsConfirmation(tree) ? (confirmations[treeId] ?? null) : null
      if (tree.newest && tree.call) await closeCoat(tree.newest, tree.facts, context, { at: now, call: tree.call })
      await Release.create({ id: newId(now), treeId, releasedBy: member.id, releasedAt: now, confirmedBy })
      await Tree.update({ releasedAt: now, updatedAt: now }, { where: { id: treeId } })
      await addTreeEvent(treeId, 'released', {
        by: member,
        at: now,
        text: `Released to burnout${confirmedBy ? `, dryness confirmed by ${confirmedBy}` : ''}.`,
      })
    }
  })
}

/**
 * Takes a release back, with a reason: the tree is on the floor again and wants nothing it had not.
 *
 * @throws {AppError} not_found; conflict when the tree is not released.
 */
export function withdrawRelease(treeId: string, reason: string, { member, clock }: By): Promise<void> {
  return inTransaction(async () => {
    const tree = await Tree.findByPk(treeId)
    if (!tree) throw new AppError('not_found', 'There is no such tree.')
    const release = await Release.findOne({ where: { treeId, withdrawnAt: null } })
    if (!release) throw new AppError('conflict', `${tree.tag} is not released.`)
    const now = clock.now()
    await release.update({ withdrawnAt: now, withdrawnBy: member.id, withdrawnReason: reason })
    await tree.update({ releasedAt: null, updatedAt: now })
    const newest = await Coat.findOne({ where: { treeId, withdrawnAt: null }, order: [['number', 'DESC']] })
    if (newest) await reopenCoat(newest.id)
    await addTreeEvent(treeId, 'release taken back', { by: member, at: now, text: `Release taken back: ${reason}` })
  })
}
