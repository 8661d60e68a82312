import type { Clock } from '@/lib/core/clock'
import type { Role } from '@/lib/members/roles'
import type { TreeInput } from '@/lib/trees/tree-input'
import { refuseStub } from '@/lib/commands/office-stub'

export function createTree(input: TreeInput, _by: { member: { id: string; name: string; role: Role }; clock: Clock }): Promise<{ id: string; tag: string }> {
  refuseStub()
  return Promise.resolve({ id: '', tag: input.tag })
}
