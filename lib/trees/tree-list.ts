import type { QueueTree } from '@/lib/queue/contract'
import type { TreeState } from '@/lib/trees/states'
import { groupOf, isOpenTree, TREE_GROUPS, type TreeGroup } from '@/lib/trees/tree-groups'

/** A tree as the list shows it. */
export type TreeListRow = QueueTree & { recipeLabel: string }

/** What asks for a hand comes first, then what dries, by its time; what nobody can act on comes last. */
const RANK: Record<TreeState, number> = {
  overdue: 0,
  'dip now': 1,
  waiting: 2,
  'dried out': 3,
  unknown: 4,
  'wax ready': 5,
  'bare wax': 6,
  'nearly dry': 7,
  drying: 7,
  wet: 7,
  'last coat on': 7,
  'ready for burnout': 8,
  held: 9,
  released: 10,
  scrapped: 11,
}

/** The promised time that lets the tree's next act happen, by its guard; infinite where none is in sight. */
export function dueAt(tree: Pick<QueueTree, 'dry' | 'guard' | 'state'>): number {
  const at = tree.guard === 'likely' && tree.state !== 'last coat on' ? tree.dry?.likelyAt : tree.dry?.safeAt
  return at ?? Number.POSITIVE_INFINITY
}

/** Order of two tags: letters, then numbers as numbers. */
export function tagOrder(left: string, right: string): number {
  const [leftLetters = '', leftDigits = '0'] = left.split('-')
  const [rightLetters = '', rightDigits = '0'] = right.split('-')
  return leftLetters < rightLetters ? -1 : leftLetters > rightLetters ? 1 : Number(leftDigits) - Number(rightDigits)
}

function compare(left: number, right: number): number {
  // Subtracting would make NaN of two infinities.
  return left < right ? -1 : left > right ? 1 : 0
}

/**
 * A new list, by what is due: overdue, dry ones by how long they have waited, then those that dry by their guard's time.
 * Ties go by tag, numbers as numbers. Released and scrapped trees stand newest first.
 */
export function sortByDue<Row extends QueueTree>(trees: readonly Row[]): Row[] {
  return trees.toSorted((left, right) => {
    const rank = RANK[left.state] - RANK[right.state]
    if (rank !== 0) return rank
    const since = compare(left.stateSince ?? 0, right.stateSince ?? 0)
    if (!isOpenTree(left) && since !== 0) return -since
    if (RANK[left.state] === 7) return compare(dueAt(left), dueAt(right)) || tagOrder(left.tag, right.tag)
    return since || tagOrder(left.tag, right.tag)
  })
}

function matchesWords(tree: QueueTree, words: readonly string[]): boolean {
  const text = `${tree.tag} ${tree.title} ${tree.place.name}`.toLocaleLowerCase()
  return words.every((word) => text.includes(word))
}

/** Trees of a group (all open ones for null) whose tag, piece or place carries every word typed. */
export function filterTrees<Row extends QueueTree>(
  trees: readonly Row[],
  { query, group }: { query: string; group: TreeGroup | null },
): Row[] {
  const words = query.toLocaleLowerCase().split(/\s+/).filter(Boolean)
  return trees.filter((tree) => (group === null ? isOpenTree(tree) : groupOf(tree.state) === group) && matchesWords(tree, words))
}

/** How many open trees each group would show for these words; null counts all. Those that left are not counted: there is no end of them. */
export function countGroups(trees: readonly QueueTree[], query: string): Map<TreeGroup | null, number> {
  const counts = new Map<TreeGroup | null, number>([[null, filterTrees(trees, { query, group: null }).length]])
  for (const { key } of TREE_GROUPS) if (key !== 'gone') counts.set(key, filterTrees(trees, { query, group: key }).length)
  return counts
}
