import { deviceInput, pushDevices, pushTestAnswer, subscribeAnswer, subscribeInput } from '@/lib/notices/push-contract'
import type { DoorDescription } from '@/lib/server/doors/door'
import { TEST_PUSHES_PER_MINUTE } from '@/lib/server/limits'

const DEVICE_ID = '018f7d1e-7c00-7000-8000-000000000005'

export const NOTICE_DOORS: readonly DoorDescription[] = [
  {
    operationId: 'listPushDevices',
    method: 'GET',
    path: '/api/v1/push/subscriptions',
    group: 'Notices',
    summary: "The member's own devices",
    text: "With the server's public key, which a new device subscribes with.",
    who: 'subscribe',
    answers: { 200: { text: 'The devices.', schema: pushDevices } },
  },
  {
    operationId: 'savePushDevice',
    method: 'POST',
    path: '/api/v1/push/subscriptions',
    group: 'Notices',
    summary: 'Turn notices on for a device',
    text: "Takes what the browser's own subscription holds. The same device again is renewed.",
    who: 'subscribe',
    body: {
      schema: subscribeInput,
      example: {
        endpoint: 'https://updates.push.services.mozilla.com/wpush/v2/gAAAA',
        keys: {
          p256dh: 'BCVxsr7N_eNgVRqvHtD0zTZsEc6-VV-JvLexhqUzORcxaOzi6-AYWXvTBHm4bjyPjs7Vd8pZGH6SRpkNtoIAiw4',
          auth: 'BTBZMqHH6r4Tts7J_aSIgg',
        },
        vapidPublicKey: 'BDd3_hVL9fZi9Ybo2UUzA284WG5FZR30_95YeZJsiApwXKpNcF1rRPF3foIiBHXRdJI2Qhumhf6_LFTeZaNndIo',
        scope: 'every tree',
        label: 'Phone',
      },
    },
    answers: {
      201: { text: 'A new device.', schema: subscribeAnswer, example: { id: DEVICE_ID } },
      200: { text: 'Known before; renewed.', schema: subscribeAnswer, example: { id: DEVICE_ID } },
    },
    problems: ['conflict', 'unprocessable'],
  },
  {
    operationId: 'removePushDevice',
    method: 'DELETE',
    path: '/api/v1/push/subscriptions',
    group: 'Notices',
    summary: 'Turn notices off for a device',
    text: "One of the member's own, by its address or by its id.",
    who: 'subscribe',
    body: { schema: deviceInput, example: { id: DEVICE_ID } },
    answers: { 204: { text: 'Gone, or never there.' } },
  },
  {
    operationId: 'testPush',
    method: 'POST',
    path: '/api/v1/push/test',
    group: 'Notices',
    summary: 'Send a test to a device',
    text: "One of the member's own. The answer says in words what its push service said.",
    who: 'subscribe',
    body: { schema: deviceInput, example: { id: DEVICE_ID } },
    answers: { 200: { text: 'What became of it.', schema: pushTestAnswer, example: { isSent: true, words: 'Sent.' } } },
    problems: ['not_found'],
    limit: { requests: TEST_PUSHES_PER_MINUTE, per: 'member' },
  },
]
