import { deviceAnswered, deviceFailed, forgetEndpoint } from '@/lib/commands/record-delivery'
import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import { log } from '@/lib/core/log'
import { testText } from '@/lib/notices/notice-text'
import type { DeviceInput, PushMessage, PushTestAnswer } from '@/lib/notices/push-contract'
import type { PushOutcome, PushSender } from '@/lib/server/push-sender'
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
  if (outcome.kind === 'our fault' || outcome.kind === 'retry') {
    log('push.test-failed', { subscriptionId: known.id, outcome: outcome.kind, detail: outcome.detail })
  }
  // The send stands outside: a slow push service must not hold the write lock.
  await inTransaction(async () => {
    const now = clock.now()
    if (outcome.kind === 'sent') await deviceAnswered(known.id, now)
    else if (outcome.kind === 'gone') await forgetEndpoint(known.endpoint, sentAt)
    else await deviceFailed(known.id, outcome.words, now)
  })
  return { isSent: outcome.kind === 'sent', words: wordsOf(outcome) }
}

function wordsOf(outcome: PushOutcome): string {
  if (outcome.kind === 'sent') return 'The push service took it. It should show within a minute.'
  if (outcome.kind === 'gone') return 'The push service does not know this device any more. Turn notices on again.'
  return outcome.words
}
