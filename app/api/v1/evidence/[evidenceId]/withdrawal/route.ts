import { withdrawEvidence } from '@/lib/commands/withdraw-evidence'
import { memberRoute } from '@/lib/server/api'
import { readJson } from '@/lib/server/read-json'
import { withdrawEvidenceInput } from '@/lib/trees/evidence-input'

/** Takes a wrong piece of evidence out of the reckoning; it stays in the history. */
export const POST = memberRoute<{ evidenceId: string }>('evidence', async ({ request, params, member, clock }) => {
  const answer = await withdrawEvidence(params.evidenceId, await readJson(request, withdrawEvidenceInput), { member, clock })
  return Response.json(answer.response, { status: answer.status })
})
