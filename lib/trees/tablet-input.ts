import { z } from 'zod'
import { reasonInput } from '@/lib/trees/tree-input'

const operationId = z.uuid('The operation id is not a UUID.')

/** Bodies of the small writes that a tablet makes; each carries its own operation id. */
export const holdInput = z.strictObject({ operationId, reason: reasonInput })
export const placeInput = z.strictObject({
  operationId,
  placeId: z.uuid(),
  movedAt: z.int().min(0).optional().describe('When it was moved, epoch milliseconds (UTC), where that is told later; now without it.'),
})
export const stirInput = z.strictObject({ operationId })

/** Their answers: what was taken in. */
export const holdAnswer = z.object({ treeId: z.uuid(), reason: z.string(), holdId: z.uuid() })
export const placeAnswer = placeInput.omit({ operationId: true, movedAt: true }).extend({ treeId: z.uuid() })
export const stirAnswer = z.object({ bathId: z.uuid() })
