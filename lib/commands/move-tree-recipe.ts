import { retiredBaths } from '@/lib/commands/retired-baths'
import { addTreeEvent } from '@/lib/commands/tree-event'
import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import type { Actor } from '@/lib/members/actor'
import { loadMovingTrees } from '@/lib/queries/moving-trees'
import { moveRefusal } from '@/lib/recipes/move-rules'
import { inTransaction, Recipe, RecipeCoat, RecipeVersion, Tree } from '@/models'

/**
 * Moves trees to a newer version of their recipe: all of them, or none. Coats that are on stay as they are, with their own need,
 * target, guard and longest wait; the version's coat n applies to the coats not on yet.
 *
 * @throws {AppError} not_found for the version or a tree; conflict that names each tree that cannot move, and why, or a bath of the
 *   version that is retired.
 */
export function moveTreesToVersion(
  { versionId, treeIds }: { versionId: string; treeIds: readonly string[] },
  { member, clock }: { member: Actor; clock: Clock },
): Promise<{ tags: string[]; version: number }> {
  return inTransaction(async () => {
    const now = clock.now()
    const to = await RecipeVersion.findByPk(versionId)
    if (!to) throw new AppError('not_found', 'There is no such version.')
    const coatCount = await RecipeCoat.count({ where: { recipeVersionId: versionId } })
    const trees = await loadMovingTrees({ ids: [...new Set(treeIds)] })
    if (trees.length < new Set(treeIds).size) throw new AppError('not_found', 'There is no such tree.')
    const refusals = trees.flatMap((tree) => moveRefusal(tree, { recipeId: to.recipeId, version: to.version, coatCount }) ?? [])
    if (refusals.length > 0) throw new AppError('conflict', ['Nothing was moved.', ...refusals].join(' '))
    const bathRefusal = await retiredBaths(versionId)
    if (bathRefusal !== null) throw new AppError('conflict', `Nothing was moved. ${bathRefusal}`)
    const { name } = await Recipe.findByPk(to.recipeId, { rejectOnEmpty: true })
    for (const tree of trees) {
      await Tree.update({ recipeVersionId: versionId, updatedAt: now }, { where: { id: tree.id } })
      await addTreeEvent(tree.id, 'recipe moved', {
        by: member,
        at: now,
        text: `Moved from version ${tree.version} to version ${to.version} of ${name}, from coat ${tree.coatsOn + 1} on.`,
        before: { recipeVersionId: tree.versionId, version: tree.version },
        after: { recipeVersionId: versionId, version: to.version },
      })
    }
    return { tags: trees.map((tree) => tree.tag), version: to.version }
  })
}
