import { estimate } from '@/lib/drying/estimate'
import { estimateInput } from '@/lib/drying/estimate-contract'
import { memberRoute } from '@/lib/server/api'
import { LARGEST_READINGS_BYTES } from '@/lib/server/limits'
import { readJson } from '@/lib/server/read-json'

/** What the drying clock makes of a coat in an air that is sent along. Reads and writes no records. */
export const POST = memberRoute('see', async ({ request }) =>
  Response.json(estimate(await readJson(request, estimateInput, { maxBytes: LARGEST_READINGS_BYTES }))),
)
