import { undoDips as undoInput } from '@/lib/coats/dip-contract'
import { undoDips } from '@/lib/commands/undo-dips'
import { memberRoute } from '@/lib/server/api'
import { readJson } from '@/lib/server/read-json'

/** Takes coats back: withdrawn, never deleted. */
export const POST = memberRoute('undo', async ({ request, member, clock }) => {
  const answer = await undoDips(await readJson(request, undoInput), { member, clock })
  return Response.json(answer.response, { status: answer.status })
})
