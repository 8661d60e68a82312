import { switchFans } from '@/lib/commands/switch-fans'
import { fansInput } from '@/lib/room/fans-contract'
import { memberRoute } from '@/lib/server/api'
import { readJson } from '@/lib/server/read-json'

/** 'Fans are on', 'fans are off': one touch, until the timetable's own next switch. */
export const POST = memberRoute<{ placeId: string }>('fans', async ({ request, params, member, clock }) => {
  const answer = await switchFans(params.placeId, await readJson(request, fansInput), { member, clock })
  return Response.json(answer.response, { status: answer.status })
})
