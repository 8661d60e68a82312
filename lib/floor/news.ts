import { dipWords } from '@/lib/format/coat-words'
import type { QueueTree } from '@/lib/queue/contract'
import type { TreeState } from '@/lib/trees/states'

const TO_DIP: ReadonlySet<TreeState> = new Set(['dip now', 'waiting', 'wax ready'])

const words = ({ tag, next }: QueueTree) => (next ? `${tag}, ${dipWords(next.number, next.kind)}` : tag)

/** What has changed between two looks at the queue, to be read out. */
export type FloorNews = { polite: string; assertive: string }

/** New to dip is said politely; what has become overdue once, at once. The first look tells nothing: all of it is on the screen. */
export function floorNews(before: readonly QueueTree[], after: readonly QueueTree[]): FloorNews {
  const stateBefore = new Map(before.map((tree) => [tree.id, tree.state]))
  const became = (tree: QueueTree, is: (state: TreeState) => boolean) => {
    const was = stateBefore.get(tree.id)
    return is(tree.state) && was !== undefined && !is(was)
  }
  const toDip = after.filter((tree) => became(tree, (state) => TO_DIP.has(state) || state === 'overdue') && tree.state !== 'overdue')
  const overdue = after.filter((tree) => became(tree, (state) => state === 'overdue'))
  return {
    polite: toDip.length === 0 ? '' : `Dip now: ${toDip.map(words).join('; ')}.`,
    assertive: overdue.length === 0 ? '' : `Overdue: ${overdue.map(words).join('; ')}.`,
  }
}
