import { z } from 'zod'
import { FAN_STATES } from '@/lib/drying/types'

const instant = z.int().describe('Epoch milliseconds, UTC.')

/** How the fans of a place stand. */
export const placeFans = z.object({
  isOn: z.boolean(),
  /** When that changes, or the timetable has them again; null: not before somebody says so. */
  until: instant.nullable(),
  /** Since when a person's word stands in place of the timetable, and whose; null where the timetable has the fans. */
  said: z.object({ at: instant, by: z.string() }).nullable(),
})
export type PlaceFans = z.infer<typeof placeFans>

/** Body of `POST /api/v1/places/{placeId}/fans`. */
export const fansInput = z.strictObject({
  operationId: z.uuid('The operation id is not a UUID.'),
  state: z.enum(FAN_STATES).describe("'timetable' takes back what was said before."),
})

/** Its answer: how the fans stand with it. */
export const fansAnswer = placeFans.omit({ said: true }).extend({ placeId: z.uuid() })
