import { pourVerdict, type PourContext, type PourVerdict } from '@/lib/burnout/pour-verdict'
import { blockingChecks, needsConfirmation } from '@/lib/burnout/release-key'
import type { QueueTree } from '@/lib/queue/contract'
import type { ReleaseCheck } from '@/lib/trees/detail-contract'
import { dueAt, sortByDue } from '@/lib/trees/tree-list'

export type BurnoutGroups = {
  ready: QueueTree[]
  /** Looked over, and lacking only a person's word that the shell is dry: it hung in damp air, say. */
  toConfirm: QueueTree[]
  driedOut: QueueTree[]
  lastCoatOn: QueueTree[]
  /** Coats still to come, and a pour date to meet. */
  stillDipped: QueueTree[]
  held: QueueTree[]
}

function byPourThenDue(left: QueueTree, right: QueueTree): number {
  const leftDay = left.pourDate ?? '9999'
  const rightDay = right.pourDate ?? '9999'
  if (leftDay !== rightDay) return leftDay < rightDay ? -1 : 1
  const [leftDue, rightDue] = [dueAt(left), dueAt(right)]
  return leftDue < rightDue ? -1 : leftDue > rightDue ? 1 : 0
}

function lacksOnlyConfirmation(checks: readonly ReleaseCheck[] | undefined): boolean {
  return checks !== undefined && blockingChecks(checks).length === 0 && needsConfirmation(checks)
}

/**
 * Open trees by what keeps them from the kiln. Nearest pour first; held ones by how long they have been held.
 *
 * @param checks release checks by tree id; a dried-out tree without any counts as not looked over.
 */
export function groupForBurnout(
  trees: readonly QueueTree[],
  checks: Readonly<Record<string, readonly ReleaseCheck[]>> = {},
): BurnoutGroups {
  const groups: BurnoutGroups = { ready: [], toConfirm: [], driedOut: [], lastCoatOn: [], stillDipped: [], held: [] }
  for (const tree of sortByDue(trees)) {
    if (tree.state === 'released' || tree.state === 'scrapped') continue
    if (tree.state === 'held') groups.held.push(tree)
    else if (tree.state === 'ready for burnout') groups.ready.push(tree)
    else if (tree.state === 'dried out' && lacksOnlyConfirmation(checks[tree.id])) groups.toConfirm.push(tree)
    else if (tree.state === 'dried out') groups.driedOut.push(tree)
    else if (tree.state === 'last coat on' || (tree.next === null && tree.newestCoat !== null)) groups.lastCoatOn.push(tree)
    else if (tree.pourDate !== null) groups.stillDipped.push(tree)
  }
  groups.ready.sort(byPourThenDue)
  groups.toConfirm.sort(byPourThenDue)
  groups.driedOut.sort(byPourThenDue)
  groups.lastCoatOn.sort(byPourThenDue)
  groups.stillDipped.sort(byPourThenDue)
  return groups
}

const trees = (count: number) => (count === 1 ? '1 tree' : `${count} trees`)

/** The headline: '4 trees ready for burnout'. */
export function burnoutHeadline(readyCount: number): string {
  return readyCount === 0 ? 'No tree ready for burnout' : `${trees(readyCount)} ready for burnout`
}

export type InTheWay = { code: 'confirm' | 'look over' | 'drying out' | 'held' | 'will miss' | 'tight'; text: string }

/** What stands between the other trees and the kiln, gravest first; empty when nothing does. */
export function inTheWay(groups: BurnoutGroups, context: PourContext): InTheWay[] {
  const verdicts = Object.values(groups)
    .flat()
    .map((tree) => pourVerdict(tree, context))
  const count = (...wanted: PourVerdict[]) => verdicts.filter((verdict) => verdict !== null && wanted.includes(verdict)).length
  const missed = count('will miss', 'passed')
  const tight = count('tight')
  const lines: (InTheWay & { count: number })[] = [
    { code: 'will miss', count: missed, text: missed === 1 ? '1 pour will be missed' : `${missed} pours will be missed` },
    { code: 'tight', count: tight, text: `${tight} tight` },
    { code: 'held', count: groups.held.length, text: `${groups.held.length} held` },
    { code: 'confirm', count: groups.toConfirm.length, text: `${groups.toConfirm.length} to confirm dry` },
    { code: 'look over', count: groups.driedOut.length, text: `${groups.driedOut.length} to look over` },
    { code: 'drying out', count: groups.lastCoatOn.length, text: `${groups.lastCoatOn.length} drying out` },
  ]
  return lines.filter((line) => line.count > 0).map(({ code, text }) => ({ code, text }))
}
