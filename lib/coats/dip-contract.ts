import { z } from 'zod'
import { COATING_WAYS, STUCCOS } from '@/lib/coats/vocabulary'
import { airTempC, relHumidityPct } from '@/lib/room/reading-contract'

const instant = z.int().min(0).describe('Epoch milliseconds, UTC.')

/** No foundry had this program before; a tablet whose clock was reset says 1970. */
const EARLIEST_DIP = Date.UTC(2020, 0, 1)

/** Body of `POST /api/v1/dips`: one run of one or more trees through one bath. */
export const dipRun = z.strictObject({
  operationId: z.uuid('The operation id is not a UUID.'),
  bathId: z.uuid(),
  stucco: z.enum(STUCCOS),
  way: z.enum(COATING_WAYS),
  drainSeconds: z.int('Drain is whole seconds.').min(0, 'Drain cannot be under 0 s.').max(600, 'Drain cannot be over 600 s.'),
  dippedAt: instant.min(EARLIEST_DIP, 'The dip lies before the year 2020: check the clock of this tablet.'),
  /** Half width of a rough time, minutes: 'about 20 min ago' is 10. */
  roughTime: z.int().min(0).max(240).optional(),
  /** Read from the wall hygrometer, for places that no sensor serves. */
  room: z.strictObject({ airTempC, relHumidityPct }).optional(),
  trees: z
    .array(
      z.strictObject({
        treeId: z.uuid(),
        coatNumber: z.int().min(1).max(40),
        placeId: z.uuid(),
        reason: z.string().trim().min(1).max(300).optional(),
      }),
    )
    .min(1, 'A run needs at least one tree.')
    .max(60, 'A run holds at most 60 trees.'),
})
export type DipRun = z.infer<typeof dipRun>

export const undoDips = z.strictObject({
  operationId: z.uuid(),
  /** The coats to take back: those of one run, or one of them. */
  coatIds: z.array(z.uuid()).min(1).max(60),
  /** Needed from a supervisor after the author's ten minutes. */
  reason: z.string().trim().min(1).max(300).optional(),
})
export type UndoDips = z.infer<typeof undoDips>

/** Answer of `POST /api/v1/dips`: 201, or 200 for a replay of the same operation. */
export const dipRunAnswer = z.object({
  operationId: z.uuid(),
  coats: z.array(
    z.object({
      coatId: z.uuid(),
      treeId: z.uuid(),
      tag: z.string(),
      number: z.int(),
      likelyAt: instant.nullable(),
      safeAt: instant.nullable(),
      deviations: z.array(z.string()),
      /** True in a replay when the coat was taken back since. */
      withdrawn: z.boolean().optional(),
    }),
  ),
})
export type DipRunAnswer = z.infer<typeof dipRunAnswer>

/** Answer of `POST /api/v1/dips/undo`. */
export const undoDipsAnswer = z.object({
  operationId: z.uuid(),
  coats: z.array(z.object({ coatId: z.uuid(), treeId: z.uuid(), number: z.int() })),
})

/** Member `trees` of the 409 problem: why each refused tree was refused. */
export const dipRefusal = z.object({
  treeId: z.uuid(),
  tag: z.string(),
  reason: z.enum(['coat already on', 'coat skipped', 'left the floor']),
  detail: z.string(),
  coatNumber: z.int(),
  by: z.string().nullable(),
  at: instant.nullable(),
})
export type DipRefusal = z.infer<typeof dipRefusal>
