import type { Clock } from '@/lib/core/clock'
import type { Role } from '@/lib/members/roles'
import type { IntakeInput } from '@/lib/trees/tree-input'
import { refuseStub } from '@/lib/commands/office-stub'

export function passIntake(_treeId: string, _intake: IntakeInput, _by: { member: { id: string; name: string; role: Role }; clock: Clock }): Promise<void> {
  refuseStub()
  return Promise.resolve(undefined)
}
