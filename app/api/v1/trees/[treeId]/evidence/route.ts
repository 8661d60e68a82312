import { recordEvidence } from '@/lib/commands/record-evidence'
import { memberRoute } from '@/lib/server/api'
import { readJson } from '@/lib/server/read-json'
import { evidenceInput } from '@/lib/trees/evidence-input'

/** What somebody weighed, felt or saw on the newest coat of a tree. */
export const POST = memberRoute<{ treeId: string }>('evidence', async ({ request, params, member, clock }) => {
  const answer = await recordEvidence(params.treeId, await readJson(request, evidenceInput), { member, clock })
  return Response.json(answer.response, { status: answer.status })
})
