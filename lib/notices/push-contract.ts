import { z } from 'zod'

/** Which trees a device hears of. */
const PUSH_SCOPES = ['every tree', 'watched trees'] as const
export type PushScope = (typeof PUSH_SCOPES)[number]

const endpoint = z.string().min(1).max(2048)

/** Body of `POST /api/v1/push/subscriptions`: what the browser's own subscription holds, and what the member chose. */
export const subscribeInput = z.strictObject({
  endpoint,
  keys: z.strictObject({ p256dh: z.string().max(120), auth: z.string().max(40) }),
  vapidPublicKey: z.string().max(120),
  scope: z.enum(PUSH_SCOPES),
  label: z.string().trim().max(200).default(''),
})
export type SubscribeInput = z.infer<typeof subscribeInput>

/** Answer of `POST /api/v1/push/subscriptions`. */
export const subscribeAnswer = z.object({ id: z.uuid() })

/** Body of `DELETE /api/v1/push/subscriptions` and of `POST /api/v1/push/test`: one device, by its address or by its id. */
export const deviceInput = z.union([z.strictObject({ endpoint }), z.strictObject({ id: z.uuid() })])
export type DeviceInput = z.infer<typeof deviceInput>

const pushDevice = z.object({
  id: z.uuid(),
  label: z.string(),
  scope: z.enum(PUSH_SCOPES),
  /** So that a browser finds itself in the list; the address itself stays on the server. */
  endpointHash: z.string(),
  createdAt: z.int(),
  lastOkAt: z.int().nullable(),
  failingSince: z.int().nullable(),
  lastError: z.string().nullable(),
  /** The server's key has changed since: the device has to subscribe again. */
  isOutdated: z.boolean(),
})
export type PushDevice = z.infer<typeof pushDevice>

/** Answer of `GET /api/v1/push/subscriptions`. */
export const pushDevices = z.object({
  publicKey: z.string(),
  /** Whose list this is: a browser that was another member's does not join it by itself. */
  memberId: z.uuid(),
  devices: z.array(pushDevice),
})
export type PushDevices = z.infer<typeof pushDevices>

/** Answer of `POST /api/v1/push/test`: what the push service said, in words. */
export const pushTestAnswer = z.object({ isSent: z.boolean(), words: z.string() })
export type PushTestAnswer = z.infer<typeof pushTestAnswer>

/** What travels to the device. Short text and ids only: it shows on lock screens. */
export type PushMessage = { title: string; body: string; tag: string; path: string; at: number }
