import { estimate } from '@/lib/drying/estimate'
import { estimateInput } from '@/lib/drying/estimate-contract'
import { memberRoute } from '@/lib/server/api'
import { readJson } from '@/lib/server/read-json'

const LARGEST_BODY_BYTES = 2 * 1024 * 1024

/** What the drying clock makes of a coat in an air that is sent along. Reads and writes no records. */
export const POST = memberRoute('see', async ({ request }) =>
  Response.json(estimate(await readJson(request, estimateInput, { maxBytes: LARGEST_BODY_BYTES }))),
)
