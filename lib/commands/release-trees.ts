import type { Clock } from '@/lib/core/clock'
import type { Role } from '@/lib/members/roles'
import type { Confirmation } from '@/lib/trees/tree-input'
import { refuseStub } from '@/lib/commands/office-stub'

export function releaseTrees(
  _treeIds: readonly string[],
  _options: { confirmations: Readonly<Record<string, Confirmation | null>> },
  _by: { member: { id: string; name: string; role: Role }; clock: Clock },
): Promise<void> {
  refuseStub()
  return Promise.resolve(undefined)
}
