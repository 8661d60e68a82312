import { recordTypedReading } from '@/lib/commands/record-typed-reading'
import { typedReading } from '@/lib/room/reading-contract'
import { memberRoute } from '@/lib/server/api'
import { readJson } from '@/lib/server/read-json'

/** A person reads the wall hygrometer. */
export const POST = memberRoute('read', async ({ request, member, clock }) => {
  const answer = await recordTypedReading(await readJson(request, typedReading), { member, clock })
  return Response.json(answer.response, { status: answer.status })
})
