import type { Job } from '@/jobs/job'
import { claimDeliveries, type ClaimedDelivery } from '@/lib/commands/claim-deliveries'
import { recordDelivery } from '@/lib/commands/record-delivery'
import type { Clock } from '@/lib/core/clock'
import { log } from '@/lib/core/log'
import type { PushOutcome, PushSender } from '@/lib/server/push-sender'

/** At once: a service that hangs holds up so many and no more. */
const BATCH = 20
/** A pass stops here; the next one goes on. */
const BATCHES_PER_PASS = 50

export type SendPushesParts = {
  sender: PushSender
  /** 0 to 1, spreads retries. */
  random: () => number
  isSuspended: () => boolean
}

/** Half a minute after each look at the floor, and right after it: sends what is due. */
export function sendPushes({ sender, random, isSuspended }: SendPushesParts): Job {
  return {
    name: 'send-pushes',
    schedule: '30 * * * * *',
    run: async ({ clock, isStopping }) => {
      const counts: Record<PushOutcome['kind'], number> = { sent: 0, gone: 0, 'our fault': 0, retry: 0 }
      if (isSuspended()) return { suspended: true }
      for (let batch = 0; batch < BATCHES_PER_PASS && !isStopping(); batch += 1) {
        const claimed = await claimDeliveries({ clock, limit: BATCH })
        if (claimed.length === 0) break
        const outcomes = await Promise.all(claimed.map((delivery) => deliver(delivery, { sender, random, clock })))
        for (const outcome of outcomes) counts[outcome] += 1
      }
      return counts
    },
  }
}

async function deliver(
  delivery: ClaimedDelivery,
  { sender, random, clock }: { sender: PushSender; random: () => number; clock: Clock },
): Promise<PushOutcome['kind']> {
  const { message, urgency, expiresAt } = delivery
  const ttlSeconds = Math.max(1, Math.ceil((expiresAt - clock.now()) / 1000))
  const outcome = await sender.send(delivery, JSON.stringify(message), { ttlSeconds, urgency, topic: message.tag })
  if (outcome.kind === 'our fault' || outcome.kind === 'retry') {
    // Ids only: an endpoint is a secret of its device.
    log('push.not-taken', { deliveryId: delivery.id, outcome: outcome.kind, detail: outcome.detail, attempts: delivery.attempts })
  }
  await recordDelivery(delivery, outcome, { clock, jitter: random() })
  return outcome.kind
}
