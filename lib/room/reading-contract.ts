import { z } from 'zod'
import { AIR_TEMP_LIMITS_C, HUMIDITY_WORDS, REL_HUMIDITY_LIMITS_PCT } from '@/lib/room/air-limits'

/** What a shell room's air can be; anything else is a fault of the sensor or a slip of the finger. */
export const airTempC = z
  .number('Temperature is a number in °C.')
  .min(AIR_TEMP_LIMITS_C.least, 'A shell room is not colder than -10 °C.')
  .max(AIR_TEMP_LIMITS_C.most, 'A shell room is not hotter than 60 °C.')

export const relHumidityPct = z
  .number(HUMIDITY_WORDS.notANumber)
  .min(REL_HUMIDITY_LIMITS_PCT.least, HUMIDITY_WORDS.tooLow)
  .max(REL_HUMIDITY_LIMITS_PCT.most, HUMIDITY_WORDS.tooHigh)

/** An instant as ISO 8601 with a zone, or epoch milliseconds. */
export const instant = z
  .union([z.int().min(0), z.iso.datetime({ offset: true })], 'A time is ISO 8601 with its zone, or epoch milliseconds.')
  .transform((value) => (typeof value === 'number' ? value : Date.parse(value)))

const measuredAt = instant.describe('When it was measured: ISO 8601 with a zone, or epoch milliseconds (UTC).')

/** One row of `POST /api/v1/readings`; rows are checked one by one so that good ones are kept. */
export const readingRow = z.strictObject({ measuredAt, airTempC, relHumidityPct })
export type ReadingRow = z.infer<typeof readingRow>

/** Body of `POST /api/v1/readings`: at most 10,000 rows. */
export const readingBatch = z.strictObject({ readings: z.array(z.unknown()).min(1).max(10_000) })

/** Answer: how many rows were new, already known, and which were refused. */
export const readingBatchAnswer = z.object({
  accepted: z.int(),
  repeated: z.int(),
  rejected: z.array(z.object({ index: z.int(), reason: z.string() })),
})
export type ReadingBatchAnswer = z.infer<typeof readingBatchAnswer>

/** A person reads the wall hygrometer: now, or at the time they name. */
export const typedReading = z.strictObject({
  operationId: z.uuid(),
  sensorId: z.int(),
  airTempC,
  relHumidityPct,
  measuredAt: measuredAt.optional(),
})

/** Answer of `POST /api/v1/readings/typed`: the instant from which it counts. */
export const typedReadingAnswer = z.object({ sensorId: z.int(), measuredAt: z.int() })
