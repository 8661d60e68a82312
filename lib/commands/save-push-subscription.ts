import type { Clock } from '@/lib/core/clock'
import { env } from '@/lib/core/env'
import { AppError } from '@/lib/core/errors'
import { newId } from '@/lib/core/ids'
import type { SubscribeInput } from '@/lib/notices/push-contract'
import { DEVICES_PER_MEMBER, endpointProblem, keysProblem } from '@/lib/notices/push-endpoint'
import { inTransaction, PushSubscription } from '@/models'

/**
 * Keeps a browser's push subscription for a member. The same browser again renews it; another member on it takes it over.
 *
 * @throws {AppError} unprocessable for an address or keys that no browser makes, conflict past ten devices.
 */
export function savePushSubscription(
  input: SubscribeInput,
  { memberId, clock }: { memberId: string; clock: Clock },
): Promise<{ id: string; isNew: boolean }> {
  const { PUSH_EXTRA_HOSTS, VAPID_PUBLIC_KEY } = env()
  const problem = endpointProblem(input.endpoint, PUSH_EXTRA_HOSTS) ?? keysProblem(input.keys)
  if (problem) throw new AppError('unprocessable', problem)
  if (input.vapidPublicKey !== VAPID_PUBLIC_KEY) {
    throw new AppError('unprocessable', 'This device subscribed with another key. Turn notices off and on again.')
  }
  return inTransaction(async () => {
    const now = clock.now()
    const { endpoint, keys, scope, label, vapidPublicKey } = input
    const values = { ...keys, scope, label, vapidPublicKey, createdAt: now }
    const known = await PushSubscription.findOne({ where: { endpoint } })
    if (known?.memberId === memberId) {
      // Renewed, so that an answer to an older send cannot take it away.
      const isSameKey = known.p256dh === keys.p256dh && known.auth === keys.auth
      await known.update({ ...values, ...(!isSameKey && { failingSince: null, lastError: null }) })
      return { id: known.id, isNew: false }
    }
    // What was on its way to the member before must not show here.
    await known?.destroy()
    if ((await PushSubscription.count({ where: { memberId } })) >= DEVICES_PER_MEMBER) {
      throw new AppError('conflict', `You have ${DEVICES_PER_MEMBER} devices already. Turn one of them off first.`)
    }
    const id = newId(now)
    await PushSubscription.create({ id, memberId, endpoint, ...values })
    return { id, isNew: true }
  })
}
