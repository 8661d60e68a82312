import { millisecondsInDay } from 'date-fns/constants'
import type { Clock } from '@/lib/core/clock'
import { loadFloor } from '@/lib/queries/floor'
import { queueTree } from '@/lib/queue/assemble'
import type { TreeListRow } from '@/lib/trees/tree-list'

const LEFT_WITHIN_MS = 60 * millisecondsInDay

/** Every tree on the floor, and those that left it within 60 days, by tag. */
export async function loadTreeList({ clock }: { clock: Clock }): Promise<TreeListRow[]> {
  const now = clock.now()
  const [floor, left] = await Promise.all([
    loadFloor({ now, trees: { on: 'floor' } }),
    loadFloor({ now, trees: { leftSince: now - LEFT_WITHIN_MS } }),
  ])
  return [...floor.trees, ...left.trees]
    .map((tree) => ({ ...queueTree(tree, floor.context.places), recipeLabel: tree.facts.recipe.name }))
    .toSorted((a, b) => a.tag.localeCompare(b.tag, 'en', { numeric: true }))
}
