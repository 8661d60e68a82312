import type { DeviceInput } from '@/lib/notices/push-contract'
import { inTransaction, PushSubscription } from '@/models'

/** Takes one of the member's own devices off the list. Without effect where it is gone already. */
export async function removePushSubscription(device: DeviceInput, { memberId }: { memberId: string }): Promise<void> {
  await inTransaction(() => PushSubscription.destroy({ where: { ...device, memberId } }))
}
