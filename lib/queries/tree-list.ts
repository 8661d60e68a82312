import { stubTrees } from '@/lib/queries/office-stub'
import type { Clock } from '@/lib/core/clock'
import type { TreeListRow } from '@/lib/trees/tree-list'

/** Every tree on the floor, and those that left it within the last 60 days. */
export function loadTreeList(_options: { clock: Clock }): Promise<TreeListRow[]> {
  return Promise.resolve(stubTrees().map((tree) => ({ ...tree, recipeLabel: tree.coats.length > 8 ? 'Bronze 14, large' : 'Bronze 8' })))
}
