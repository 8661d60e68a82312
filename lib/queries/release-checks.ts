import type { Clock } from '@/lib/core/clock'
import { loadFloor } from '@/lib/queries/floor'
import type { ReleaseCheck } from '@/lib/trees/detail-contract'
import { releaseChecks } from '@/lib/trees/release-checks'

/** What stands between some trees and their release, by tree id. */
export async function loadReleaseChecks(treeIds: readonly string[], { clock }: { clock: Clock }): Promise<Record<string, ReleaseCheck[]>> {
  const { trees } = await loadFloor({ now: clock.now(), trees: { ids: treeIds } })
  return Object.fromEntries(trees.map((tree) => [tree.facts.id, releaseChecks(tree, null)]))
}
