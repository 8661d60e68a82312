import { stubTrees } from '@/lib/queries/office-stub'
import type { Clock } from '@/lib/core/clock'
import type { ReleaseCheck } from '@/lib/trees/detail-contract'

export function loadReleaseChecks(treeIds: readonly string[], _options: { clock: Clock }): Promise<Record<string, ReleaseCheck[]>> {
  const checks: Record<string, ReleaseCheck[]> = {}
  for (const tree of stubTrees().filter((entry) => treeIds.includes(entry.id))) {
    const isLookedOver = tree.state === 'ready for burnout' || tree.tag === 'T-112'
    checks[tree.id] = [
      { code: 'coats', isMet: true, text: `All ${tree.coats.length} coats are on.` },
      { code: 'dry', isMet: true, text: 'Dried out, safe since Mon 19:10.' },
      { code: 'look-over', isMet: isLookedOver, text: isLookedOver ? 'Looked over by Ines, Mon 20:10.' : 'Not looked over since the last coat.' },
      { code: 'hold', isMet: true, text: 'No hold.' },
      ...(tree.tag === 'T-112' ? [{ code: 'confirmation', isMet: false, text: 'Damp in store: confirm it dry by touch, weight or temperature.' } as const] : []),
    ]
  }
  return Promise.resolve(checks)
}
