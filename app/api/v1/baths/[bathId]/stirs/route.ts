import { recordStir } from '@/lib/commands/record-stir'
import { runOperation } from '@/lib/commands/run-operation'
import { memberRoute } from '@/lib/server/api'
import { readJson } from '@/lib/server/read-json'
import { stirInput } from '@/lib/trees/tablet-input'

/** 'Stirred': one touch before the first dip of the day. */
export const POST = memberRoute<{ bathId: string }>('stir', async ({ request, params, member, clock }) => {
  const { operationId } = await readJson(request, stirInput)
  const body = { bathId: params.bathId }
  const answer = await runOperation({ operationId, kind: 'stir', memberId: member.id, body, clock }, async () => {
    await recordStir(params.bathId, { member, clock })
    return { status: 201, response: body }
  })
  return Response.json(answer.response, { status: answer.status })
})
