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

const BAROMETER_WORDS = 'pressurePa is in pascals, 50000 to 110000: 101325, not 1013.25.'

/**
 * One row of `POST /api/v1/readings`; rows are checked one by one so that good ones are kept. What no shell room can be is a row all
 * the same: it is kept and not counted.
 */
export const readingRow = z.strictObject({
  measuredAt,
  airTempC: z
    .number('Temperature is a number in °C.')
    .describe(`Air temperature, °C. Outside ${AIR_TEMP_LIMITS_C.least} to ${AIR_TEMP_LIMITS_C.most} it is kept and not counted.`),
  relHumidityPct: z
    .number(HUMIDITY_WORDS.notANumber)
    .describe(
      `Relative humidity, % (52.5, not 0.525). Outside ${REL_HUMIDITY_LIMITS_PCT.least} to ${REL_HUMIDITY_LIMITS_PCT.most} it is kept and not counted.`,
    ),
  pressurePa: z
    .number(BAROMETER_WORDS)
    .min(50_000, BAROMETER_WORDS)
    .max(110_000, BAROMETER_WORDS)
    .optional()
    .describe('Of a barometer at the sensor, Pa, not reduced to sea level. Without it the altitude of the foundry stands for it.'),
})
export type ReadingRow = z.infer<typeof readingRow>

const batteryWords = 'batteryPct is what is left, 0 to 100.'

const ofTheSender = {
  sentAt: instant.optional().describe('The time by the clock of the sender at this moment, so that Kilnward can tell when it goes wrong.'),
  batteryPct: z
    .number(batteryWords)
    .min(0, batteryWords)
    .max(100, batteryWords)
    .optional()
    .describe('What is left in the battery of the sensor, %.'),
}

const MOST_ROWS = 10_000

/** Body of `POST /api/v1/readings`: at most 10,000 rows. */
export const readingBatch = z.strictObject({ readings: z.array(z.unknown()).min(1).max(MOST_ROWS), ...ofTheSender })

/** The same as it is described: stricter than the door, which checks row by row so that one bad row does not cost the others. */
export const describedBatch = z.strictObject({ readings: z.array(readingRow).min(1).max(MOST_ROWS), ...ofTheSender })

const rowNotes = z.array(z.object({ index: z.int().describe('Its place in the list, counted from 0.'), reason: z.string() }))

/** Answer of `POST /api/v1/readings`. Accepted, repeated and rejected rows are all rows that were sent. */
export const readingBatchAnswer = z.object({
  accepted: z.int().describe('Rows that were new, and are kept.'),
  repeated: z.int().describe('Rows whose moment was known already.'),
  rejected: rowNotes.describe('Rows that are no readings, and were not kept.'),
  marked: rowNotes.describe('Rows that are kept and shown and count for nothing in the drying times, new and known ones.'),
  clockOffsetSeconds: z
    .int()
    .nullable()
    .describe(
      'How far the clock of the sender is ahead of the server; negative when it is behind; null within 2 min, or where nobody can tell.',
    ),
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
