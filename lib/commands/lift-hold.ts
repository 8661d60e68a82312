import type { Clock } from '@/lib/core/clock'
import type { Role } from '@/lib/members/roles'
import { refuseStub } from '@/lib/commands/office-stub'

export function liftHold(_treeId: string, _reason: string, _by: { member: { id: string; name: string; role: Role }; clock: Clock }): Promise<void> {
  refuseStub()
  return Promise.resolve(undefined)
}
