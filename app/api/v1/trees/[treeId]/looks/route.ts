import { recordLook } from '@/lib/commands/record-look'
import { runOperation } from '@/lib/commands/run-operation'
import { memberRoute } from '@/lib/server/api'
import { readJson } from '@/lib/server/read-json'
import { lookInput } from '@/lib/trees/tablet-input'

/** 'Looks dry' or 'not yet' on the newest coat of a tree. */
export const POST = memberRoute<{ treeId: string }>('look', async ({ request, params, member, clock }) => {
  const { operationId, verdict } = await readJson(request, lookInput)
  const body = { treeId: params.treeId, verdict }
  const answer = await runOperation({ operationId, kind: 'look', memberId: member.id, body, clock }, async () => {
    await recordLook(params.treeId, verdict, { member, clock })
    return { status: 201, response: body }
  })
  return Response.json(answer.response, { status: answer.status })
})
