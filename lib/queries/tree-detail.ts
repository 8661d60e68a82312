import { stubDetail } from '@/lib/queries/office-stub'
import type { Clock } from '@/lib/core/clock'
import type { Role } from '@/lib/members/roles'
import type { TreeDetail } from '@/lib/trees/detail-contract'

export function loadTreeDetail({ tag }: { tag: string; viewer: { id: string; role: Role }; clock: Clock }): Promise<TreeDetail | null> {
  return Promise.resolve(stubDetail(tag))
}
