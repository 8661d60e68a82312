import { Op } from 'sequelize'
import type { ClaimedDelivery } from '@/lib/commands/claim-deliveries'
import type { Clock } from '@/lib/core/clock'
import { nextAttemptAt } from '@/lib/notices/retry-plan'
import type { PushOutcome } from '@/lib/server/push-sender'
import { Delivery, inTransaction, PushSubscription } from '@/models'

/**
 * Writes down what became of a claimed delivery, and what that says of the device.
 * Does nothing when the lease was lost and another sender has taken it.
 *
 * @param jitter 0 to 1, spreads retries.
 */
export async function recordDelivery(
  delivery: ClaimedDelivery,
  outcome: PushOutcome,
  { clock, jitter }: { clock: Clock; jitter: number },
): Promise<void> {
  await inTransaction(async () => {
    const now = clock.now()
    const isOurs = { id: delivery.id, status: 'sending', attempts: delivery.attempts }
    const settle = async (values: Partial<Pick<Delivery, 'status' | 'sentAt' | 'lastError' | 'nextAttemptAt'>>) => {
      const [changed] = await Delivery.update({ ...values, leaseUntil: null }, { where: isOurs })
      return changed > 0
    }
    switch (outcome.kind) {
      case 'sent': {
        if (await settle({ status: 'sent', sentAt: now, lastError: null })) await deviceAnswered(delivery.subscriptionId, now)
        return
      }
      case 'gone': {
        await forgetEndpoint(delivery.endpoint, delivery.claimedAt)
        // A device that subscribed again meanwhile still wants to hear.
        const isBack = (await PushSubscription.count({ where: { id: delivery.subscriptionId } })) > 0
        await settle(isBack ? { status: 'waiting', nextAttemptAt: now } : { status: 'gone', lastError: null })
        return
      }
      case 'our fault': {
        if (await settle({ status: 'failed', lastError: outcome.words })) await deviceFailed(delivery.subscriptionId, outcome.words, now)
        return
      }
      case 'retry': {
        const { attempts, expiresAt } = delivery
        const nextAt = nextAttemptAt({ attempts, now, expiresAt, retryAfterMs: outcome.retryAfterMs, jitter })
        const isKept = await settle({
          lastError: outcome.words,
          ...(nextAt === null ? { status: 'expired' } : { status: 'waiting', nextAttemptAt: nextAt }),
        })
        if (isKept) await deviceFailed(delivery.subscriptionId, outcome.words, now)
      }
    }
  })
}

/** Takes away a subscription that its push service has given up, unless the browser subscribed again after the send began. */
export async function forgetEndpoint(endpoint: string, sentAt: number): Promise<void> {
  await PushSubscription.destroy({ where: { endpoint, createdAt: { [Op.lte]: sentAt } } })
}

/** The push service took a message for this device. */
export async function deviceAnswered(subscriptionId: string, now: number): Promise<void> {
  await PushSubscription.update({ lastOkAt: now, failingSince: null, lastError: null }, { where: { id: subscriptionId } })
}

/** A message for this device was not taken; the words are ours, never the service's. */
export async function deviceFailed(subscriptionId: string, words: string, now: number): Promise<void> {
  await PushSubscription.update({ lastError: words }, { where: { id: subscriptionId } })
  await PushSubscription.update({ failingSince: now }, { where: { id: subscriptionId, failingSince: null } })
}
