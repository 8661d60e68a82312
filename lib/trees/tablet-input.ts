import { z } from 'zod'
import { reasonInput } from '@/lib/trees/tree-input'

const operationId = z.uuid('The operation id is not a UUID.')

/** Bodies of the small writes that a tablet makes; each carries its own operation id. */
export const lookInput = z.strictObject({ operationId, verdict: z.enum(['looks dry', 'not yet']) })
export const holdInput = z.strictObject({ operationId, reason: reasonInput })
export const placeInput = z.strictObject({ operationId, placeId: z.uuid() })
export const stirInput = z.strictObject({ operationId })
