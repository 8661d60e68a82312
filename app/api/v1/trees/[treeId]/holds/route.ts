import { holdTree } from '@/lib/commands/hold-tree'
import { runOperation } from '@/lib/commands/run-operation'
import { memberRoute } from '@/lib/server/api'
import { readJson } from '@/lib/server/read-json'
import { holdInput } from '@/lib/trees/tablet-input'

/** Holds a tree. A hold is lifted on the tree's page, by a supervisor. */
export const POST = memberRoute<{ treeId: string }>('hold', async ({ request, params, member, clock }) => {
  const { operationId, reason } = await readJson(request, holdInput)
  const body = { treeId: params.treeId, reason }
  const answer = await runOperation({ operationId, kind: 'hold', memberId: member.id, body, clock }, async () => ({
    status: 201,
    response: { ...body, ...(await holdTree(params.treeId, reason, { member, clock })) },
  }))
  return Response.json(answer.response, { status: answer.status })
})
