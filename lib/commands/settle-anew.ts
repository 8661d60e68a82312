import { settleCoat } from '@/lib/commands/settle-coat'
import { deriveFloor } from '@/lib/queries/floor'
import { loadFacts } from '@/lib/queries/load-facts'
import { loadFoundry } from '@/lib/queries/load-foundry'
import { clockStart } from '@/lib/trees/facts'

/**
 * Works out again what the covered coats of a tree say of the clock, from one coat upwards: what was weighed around it is the water of
 * those above too. All of them where `coatId` is null.
 */
export async function settleAnew(treeId: string, coatId: string | null, now: number): Promise<void> {
  const [facts] = await loadFacts({ ids: [treeId] })
  if (!facts) return
  const number = facts.coats.find((coat) => coat.id === coatId)?.number ?? 0
  const touched = facts.coats.filter((coat) => coat.coveredAt !== null && coat.number >= number && coat.evidence.length > 0)
  if (touched.length === 0) return
  const { context } = await deriveFloor(await loadFoundry(), [facts], now, touched.map(clockStart))
  for (const coat of touched) await settleCoat(facts, coat, context)
}
