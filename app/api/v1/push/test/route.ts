import { RateLimiterMemory, type RateLimiterRes } from 'rate-limiter-flexible'
import { sendTestPush } from '@/lib/commands/send-test-push'
import { AppError } from '@/lib/core/errors'
import { deviceInput } from '@/lib/notices/push-contract'
import { memberRoute } from '@/lib/server/api'
import { TEST_PUSHES_PER_MINUTE } from '@/lib/server/limits'
import { processWide } from '@/lib/server/process-wide'
import { webPushSender } from '@/lib/server/push-sender'
import { readJson } from '@/lib/server/read-json'

const tests = processWide('push tests', () => new RateLimiterMemory({ points: TEST_PUSHES_PER_MINUTE, duration: 60 }))

/** Sends a test to one of the member's own devices and says what its push service answered. */
export const POST = memberRoute('subscribe', async ({ request, member, clock }) => {
  const device = await readJson(request, deviceInput)
  await tests.consume(member.id).catch((refusal: RateLimiterRes) => {
    throw new AppError('too_many_requests', `More than ${TEST_PUSHES_PER_MINUTE} tests in a minute. Wait a little.`, {
      retryAfterSeconds: Math.ceil(refusal.msBeforeNext / 1000),
    })
  })
  return Response.json(await sendTestPush(device, { memberId: member.id, sender: webPushSender({ clock }), clock }))
})
