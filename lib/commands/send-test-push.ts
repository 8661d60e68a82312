import { deviceAnswered, deviceFailed, forgetEndpoint } from '@/lib/commands/record-delivery'
import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import { log } from '@/lib/core/log'
import { testText } from '@/lib/notices/notice-text'
import type { DeviceInput, PushMessage, PushTestAnswer } from '@/lib/notices/push-contract'
import type { PushSender } from '@/lib/server/push-sender'
import { inTransaction, PushSubscription } from '@/models'

const TEST_TTL_SECONDS = 300

/**
 * Sends a test to one of the member's own devices at once and says what its push service answered.
 *
 * @throws {AppError} not_found.
 */
export async function sendTestPush(
  device: DeviceInput,
  { memberId, sender, clock }: { memberId: string; sender: PushSender; clock: Clock },
): Promise<PushTestAnswer> {
  const known = await PushSubscription.findOne({ where: { ...device, memberId } })
  if (!known) throw new AppError('not_found', 'This device is not on your list. Turn notices on first.')
  const sentAt = clock.now()
  const message: PushMessage = { ...testText(), tag: 'test', path: '/me', at: sentAt }
  const outcome = await sender.send(known, JSON.stringify(message), { ttlSeconds: TEST_TTL_SECONDS, urgency: 'high', topic: 'test' })
  // The send stands outside: a slow push service must not hold the write lock.
  return inTransaction(async () => {
    switch (outcome.kind) {
      case 'sent':
        await deviceAnswered(known.id, clock.now())
        return { isSent: true, words: 'The push service took it. It should show within a minute.' }
      case 'gone':
        await forgetEndpoint(known.endpoint, sentAt)
        return { isSent: false, words: 'The push service does not know this device any more. Turn notices on again.' }
      case 'our fault':
      case 'retry':
        log('push.test-failed', { subscriptionId: known.id, outcome: outcome.kind, detail: outcome.detail })
        await deviceFailed(known.id, outcome.words, clock.now())
        return { isSent: false, words: outcome.words }
    }
  })
}
