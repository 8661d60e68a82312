import { stubTrees } from '@/lib/queries/office-stub'
import type { Clock } from '@/lib/core/clock'
import type { QueueTree } from '@/lib/queue/contract'

/** Every tree on the floor, and those that left it within the last 60 days. */
export function loadTreeList(_options: { clock: Clock }): Promise<QueueTree[]> {
  return Promise.resolve(stubTrees())
}
