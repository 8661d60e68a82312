import { moveTree } from '@/lib/commands/move-tree'
import { runOperation } from '@/lib/commands/run-operation'
import { memberRoute } from '@/lib/server/api'
import { readJson } from '@/lib/server/read-json'
import { placeInput } from '@/lib/trees/tablet-input'

/** Hangs a tree somewhere else, from now on or since it was moved. */
export const POST = memberRoute<{ treeId: string }>('move', async ({ request, params, member, clock }) => {
  const { operationId, placeId, movedAt } = await readJson(request, placeInput)
  const body = { treeId: params.treeId, placeId, movedAt }
  const answer = await runOperation({ operationId, kind: 'move', memberId: member.id, body, clock }, async () => {
    await moveTree(params.treeId, placeId, { member, clock }, movedAt)
    return { status: 200, response: { treeId: params.treeId, placeId } }
  })
  return Response.json(answer.response, { status: answer.status })
})
