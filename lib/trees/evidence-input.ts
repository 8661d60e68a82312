import { z } from 'zod'
import { EVIDENCE_KINDS, SPOTS, VERDICTS, WEIGHING_MOMENTS } from '@/lib/coats/vocabulary'
import { airTempC, instant, relHumidityPct } from '@/lib/room/reading-contract'
import { MASS_LIMITS_KG, SURFACE_TEMP_LIMITS_C } from '@/lib/trees/evidence-limits'
import { reasonInput } from '@/lib/trees/tree-input'

const common = {
  operationId: z.uuid('The operation id is not a UUID.'),
  coatNumber: z.int().min(0).max(40).describe('Number of the newest coat as it was seen; 0 for bare wax.'),
  takenAt: instant.optional().describe('When it was taken; now where it is left out.'),
}
const spot = z.enum(SPOTS, 'Say where on the shell it was taken.')

const verdictInput = z.strictObject({
  ...common,
  kind: z.enum(['touch', 'colour']),
  spot,
  verdict: z.enum(VERDICTS, "Say 'dry' or 'not yet'."),
})

const weighingInput = z.strictObject({
  ...common,
  kind: z.literal('weighing'),
  moment: z.enum(WEIGHING_MOMENTS, 'Say when it hung on the scale.'),
  massKg: z
    .number('The weight is a number in kg.')
    .min(MASS_LIMITS_KG.least, 'A tree weighs 0.01 kg or more.')
    .max(MASS_LIMITS_KG.most, 'No tree weighs over 2000 kg.'),
})

const surfaceInput = z.strictObject({
  ...common,
  kind: z.literal('surface temperature'),
  spot,
  surfaceTempC: z
    .number('The surface temperature is a number in °C.')
    .min(SURFACE_TEMP_LIMITS_C.least, 'A coat is not colder than -10 °C.')
    .max(SURFACE_TEMP_LIMITS_C.most, 'A coat in the shell room is not hotter than 80 °C.'),
  /** The air beside it: only where the place's sensor does not tell. */
  room: z.strictObject({ airTempC, relHumidityPct }).optional(),
})

/** Body of `POST /api/v1/trees/{treeId}/evidence`. */
export const evidenceInput = z.discriminatedUnion('kind', [verdictInput, weighingInput, surfaceInput], 'There is no such kind of evidence.')
export type EvidenceInput = z.infer<typeof evidenceInput>

const pair = z.object({ likelyAt: z.int().nullable(), safeAt: z.int().nullable() })

/** Its answer: what was kept, and how the time of the coat stood before and after. */
export const evidenceAnswer = z.object({
  treeId: z.uuid(),
  evidenceId: z.uuid(),
  kind: z.enum(EVIDENCE_KINDS),
  before: pair.nullable(),
  after: pair.nullable(),
  unheard: z.string().nullable().describe('Why it does not move the time; null where it does.'),
})
export type EvidenceAnswer = z.infer<typeof evidenceAnswer>

/** Body of `POST /api/v1/evidence/{evidenceId}/withdrawal`: a reason after ten minutes, or for what somebody else took. */
export const withdrawEvidenceInput = z.strictObject({ operationId: common.operationId, reason: reasonInput.optional() })
export const withdrawEvidenceAnswer = z.object({ evidenceId: z.uuid(), treeId: z.uuid() })
