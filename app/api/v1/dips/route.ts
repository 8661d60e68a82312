import { dipRun } from '@/lib/coats/dip-contract'
import { logDips } from '@/lib/commands/log-dips'
import { memberRoute } from '@/lib/server/api'
import { readJson } from '@/lib/server/read-json'

/** Logs a run of dips, whole or not at all; the same operation id gets the same answer. */
export const POST = memberRoute('dip', async ({ request, member, clock }) => {
  const answer = await logDips(await readJson(request, dipRun), { member, clock })
  return Response.json(answer.response, { status: answer.replayed ? 200 : answer.status })
})
