import { removePushSubscription } from '@/lib/commands/remove-push-subscription'
import { savePushSubscription } from '@/lib/commands/save-push-subscription'
import { deviceInput, subscribeInput } from '@/lib/notices/push-contract'
import { pushDevicesOf } from '@/lib/queries/push-devices'
import { memberRoute } from '@/lib/server/api'
import { readJson } from '@/lib/server/read-json'

/** The member's own devices, and the server's key that a new one subscribes with. */
export const GET = memberRoute('subscribe', async ({ member }) => Response.json(await pushDevicesOf(member.id)))

/** Turns notices on for a device, renews it, or changes what it hears of: the same device again is the same row. */
export const POST = memberRoute('subscribe', async ({ request, member, clock }) => {
  const input = await readJson(request, subscribeInput)
  const { id, isNew } = await savePushSubscription(input, { memberId: member.id, clock })
  return Response.json({ id }, { status: isNew ? 201 : 200 })
})

/** Turns notices off for one of the member's own devices. */
export const DELETE = memberRoute('subscribe', async ({ request, member }) => {
  await removePushSubscription(await readJson(request, deviceInput), { memberId: member.id })
  return new Response(null, { status: 204 })
})
