import { logDips } from '@/lib/commands/log-dips'
import { lookOver } from '@/lib/commands/look-over'
import { recordEvidence } from '@/lib/commands/record-evidence'
import { releaseTrees } from '@/lib/commands/release-trees'
import { newId } from '@/lib/core/ids'
import type { Actor } from '@/lib/members/actor'
import { buildTree, dipBody, HOUR, type TestFoundry } from '@/tests/factories/shell-room'

const DAY = 24 * HOUR

/** Stucco of the coats of the usual recipe of the tests, in order. */
const STUCCOS = ['fine', 'medium', 'coarse', 'none'] as const

/** One coat of the usual recipe, dipped and logged at that moment. */
export function dipOne(
  foundry: TestFoundry,
  member: Actor,
  { treeId, coatNumber, placeId, at }: { treeId: string; coatNumber: number; placeId?: string; at: number },
) {
  const body = dipBody(foundry, [{ treeId, coatNumber, ...(placeId !== undefined && { placeId }), reason: 'Dipped for the test.' }], {
    dippedAt: at,
    bathId: coatNumber === 1 ? foundry.faceBathId : foundry.backupBathId,
    stucco: STUCCOS[coatNumber - 1] ?? 'none',
  })
  return logDips(body, { member, clock: { now: () => at } })
}

/** A tree that has gone the whole way: four coats a day apart from nine days ago on, each felt dry, looked over, released. */
export async function buildFormerTree(foundry: TestFoundry, member: Actor, now: number): Promise<string> {
  const { id } = await buildTree(foundry, { since: now - 9 * DAY })
  for (const coatNumber of [1, 2, 3, 4]) {
    const at = now - (9 - coatNumber) * DAY
    await dipOne(foundry, member, { treeId: id, coatNumber, at })
    const felt = { operationId: newId(), coatNumber, kind: 'touch', spot: 'outside', verdict: 'dry' } as const
    await recordEvidence(id, felt, { member, clock: { now: () => at + 20 * HOUR } })
  }
  const clock = { now: () => now - 3 * DAY }
  await lookOver(id, '', { member, clock })
  await releaseTrees([id], { confirmations: { [id]: 'touch' } }, { member, clock })
  return id
}
