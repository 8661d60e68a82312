import { unwatchTree, watchTree } from '@/lib/commands/watch-tree'
import { memberRoute } from '@/lib/server/api'

/** 'Tell me when dry'. */
export const POST = memberRoute<{ treeId: string }>('subscribe', async ({ params, member, clock }) => {
  await watchTree(params.treeId, { memberId: member.id, clock })
  return new Response(null, { status: 204 })
})

/** Not any more. */
export const DELETE = memberRoute<{ treeId: string }>('subscribe', async ({ params, member }) => {
  await unwatchTree(params.treeId, { memberId: member.id })
  return new Response(null, { status: 204 })
})
