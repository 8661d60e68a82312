import { loadRoomWhatIf } from '@/lib/queries/room-what-if'
import { roomWhatIf } from '@/lib/room/room-what-if-contract'
import { memberRoute } from '@/lib/server/api'
import { readJson } from '@/lib/server/read-json'

/** What another air from now on would do to every tree in a room. Reads the records and writes nothing. */
export const POST = memberRoute<{ sensorId: string }>('see', async ({ request, params, clock }) => {
  const choice = await readJson(request, roomWhatIf)
  const sensorId = /^\d{1,15}$/.test(params.sensorId) ? Number(params.sensorId) : 0
  return Response.json(await loadRoomWhatIf(sensorId, choice, { clock }))
})
