import type { Stucco } from '@/lib/coats/vocabulary'
import type { Queue, QueueTree } from '@/lib/queue/contract'
import type { TreeState } from '@/lib/trees/states'

/** Trees that go through one bath and take one stucco: what a person does in one go. */
export type DipGroup = {
  /** Bath and stucco, stable over polls. */
  key: string
  bathId: string
  bathName: string
  stucco: Stucco
  isFace: boolean
  /** False until somebody has stirred the bath today. */
  isStirred: boolean
  trees: QueueTree[]
}

/** The floor in the order in which it is read. */
export type FloorBoard = {
  dipNow: DipGroup[]
  drying: QueueTree[]
  lastCoatOn: QueueTree[]
  driedOut: QueueTree[]
  ready: QueueTree[]
  held: QueueTree[]
  /** Wax whose intake has not been passed: nothing to dip, but somebody has to look it over. */
  bareWax: QueueTree[]
}

const TO_DIP: ReadonlySet<TreeState> = new Set(['overdue', 'dip now', 'waiting', 'wax ready'])

/** When a tree's next act may begin by its guard; null where that is not known. */
export function dueAt(tree: QueueTree): number | null {
  if (!tree.dry) return null
  const { likelyAt, safeAt } = tree.dry
  return tree.guard === 'safe' ? (safeAt ?? likelyAt) : (likelyAt ?? safeAt)
}

/** True when one of the trees shows a drying time that rests on starting values nobody has calibrated. */
export function hasUncalibratedTime(trees: readonly QueueTree[]): boolean {
  return trees.some((tree) => tree.isUncalibrated && tree.dry !== null && tree.state !== 'unknown')
}

const NEVER = Number.MAX_SAFE_INTEGER
const byTag = (a: QueueTree, b: QueueTree) => a.tag.localeCompare(b.tag, 'en', { numeric: true })

const urgencyRank = (tree: QueueTree) => (tree.state === 'overdue' ? 0 : tree.state === 'wax ready' ? 2 : 1)
const unknownRank = (tree: QueueTree) => (tree.state === 'unknown' ? 1 : 0)

/** Overdue first, then who has waited longest, wax ready last. */
function byUrgency(a: QueueTree, b: QueueTree): number {
  return urgencyRank(a) - urgencyRank(b) || (a.stateSince ?? NEVER) - (b.stateSince ?? NEVER) || byTag(a, b)
}

/** In due order; what nobody can foresee comes last. */
function byDue(a: QueueTree, b: QueueTree): number {
  return unknownRank(a) - unknownRank(b) || (dueAt(a) ?? NEVER) - (dueAt(b) ?? NEVER) || byTag(a, b)
}

function groupsOf(trees: readonly QueueTree[], baths: Queue['baths']): DipGroup[] {
  const groups = new Map<string, DipGroup>()
  for (const tree of trees) {
    if (!tree.next) continue
    const { bathId, bathName, stucco, kind } = tree.next
    const key = `${bathId} ${stucco}`
    const bath = baths.find((candidate) => candidate.id === bathId)
    const group = groups.get(key)
    if (group) {
      group.trees.push(tree)
      group.isFace ||= kind === 'face'
      continue
    }
    groups.set(key, {
      key,
      bathId,
      bathName,
      stucco,
      isFace: kind === 'face' || bath?.kind === 'face',
      isStirred: bath?.isStirredToday ?? true,
      trees: [tree],
    })
  }
  const all = [...groups.values()]
  for (const group of all) group.trees = group.trees.toSorted(byUrgency)
  // Face coats first: their wet shell forgives waiting least. Then the group whose first tree is the most urgent.
  return all.toSorted((a, b) => Number(b.isFace) - Number(a.isFace) || byUrgency(a.trees[0]!, b.trees[0]!) || a.key.localeCompare(b.key))
}

/** Sorts the queue into what the floor shows. Released and scrapped trees have left it. */
export function arrangeFloor(queue: Pick<Queue, 'trees' | 'baths'>): FloorBoard {
  const inState = (...states: TreeState[]) => queue.trees.filter((tree) => states.includes(tree.state))
  const toDip = queue.trees.filter((tree) => TO_DIP.has(tree.state))
  return {
    dipNow: groupsOf(toDip, queue.baths),
    // A tree to dip whose recipe names no next coat cannot stand in a run; it must not vanish either.
    drying: [...inState('nearly dry', 'drying', 'wet', 'unknown'), ...toDip.filter((tree) => !tree.next)].toSorted(byDue),
    lastCoatOn: inState('last coat on').toSorted(byDue),
    driedOut: inState('dried out').toSorted(byTag),
    ready: inState('ready for burnout').toSorted(byTag),
    held: inState('held').toSorted((a, b) => (a.hold?.at ?? 0) - (b.hold?.at ?? 0) || byTag(a, b)),
    bareWax: inState('bare wax').toSorted(byTag),
  }
}

/** How many trees may be dipped now, over all groups. */
export function countTrees(groups: readonly DipGroup[]): number {
  return groups.reduce((sum, group) => sum + group.trees.length, 0)
}

/** How long the one of the trees has waited that has waited longest, milliseconds; null where none has begun to. */
export function longestWait(trees: readonly QueueTree[], now: number): number | null {
  const waits = trees.flatMap((tree) => (tree.stateSince === null ? [] : [now - tree.stateSince]))
  return waits.length > 0 ? Math.max(...waits) : null
}

/** The words of a run key. */
export function runKeyWords(count: number): string {
  if (count === 1) return 'Dip it'
  return count === 2 ? 'Dip both' : `Dip all ${count}`
}

/** 'trees' for every number but one. */
export function treesWord(count: number): string {
  return count === 1 ? '1 tree' : `${count} trees`
}
