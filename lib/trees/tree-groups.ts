import type { QueueTree } from '@/lib/queue/contract'
import type { TreeState } from '@/lib/trees/states'

/** Groups of states as the list of trees filters them; the key stands in the address bar. */
export const TREE_GROUPS = [
  { key: 'to-dip', word: 'To dip' },
  { key: 'drying', word: 'Drying' },
  { key: 'drying-out', word: 'Drying out' },
  { key: 'burnout', word: 'Dried out and ready' },
  { key: 'bare-wax', word: 'Bare wax' },
  { key: 'held', word: 'Held' },
  { key: 'gone', word: 'Released and scrapped' },
] as const
export type TreeGroup = (typeof TREE_GROUPS)[number]['key']

const GROUP_OF: Record<TreeState, TreeGroup> = {
  scrapped: 'gone',
  released: 'gone',
  held: 'held',
  'bare wax': 'bare-wax',
  'wax ready': 'to-dip',
  overdue: 'to-dip',
  'dip now': 'to-dip',
  waiting: 'to-dip',
  unknown: 'drying',
  'nearly dry': 'drying',
  drying: 'drying',
  wet: 'drying',
  'last coat on': 'drying-out',
  'dried out': 'burnout',
  'ready for burnout': 'burnout',
}

/** The group of the list that a state belongs to. */
export function groupOf(state: TreeState): TreeGroup {
  return GROUP_OF[state]
}

/** True while the tree is still the shell room's: neither released nor scrapped. */
export function isOpenTree(tree: Pick<QueueTree, 'state'>): boolean {
  return groupOf(tree.state) !== 'gone'
}

/** A group's key from the address bar; null for all open trees, also when the text names no group. */
export function readTreeGroup(value: string | undefined): TreeGroup | null {
  return TREE_GROUPS.find((group) => group.key === value)?.key ?? null
}
