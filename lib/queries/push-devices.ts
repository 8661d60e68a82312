import { env } from '@/lib/core/env'
import { sha256Hex } from '@/lib/core/ids'
import type { PushDevices } from '@/lib/notices/push-contract'
import { PushSubscription } from '@/models'

/** The member's own devices, oldest first, and the key that a new one subscribes with. */
export async function pushDevicesOf(memberId: string): Promise<PushDevices> {
  const publicKey = env().VAPID_PUBLIC_KEY
  const rows = await PushSubscription.findAll({ where: { memberId }, order: [['id', 'ASC']] })
  return {
    publicKey,
    memberId,
    devices: rows.map(({ id, label, scope, endpoint, createdAt, lastOkAt, failingSince, lastError, vapidPublicKey }) => ({
      id,
      label,
      scope,
      endpointHash: sha256Hex(endpoint),
      createdAt,
      lastOkAt,
      failingSince,
      lastError,
      isOutdated: vapidPublicKey !== publicKey,
    })),
  }
}
