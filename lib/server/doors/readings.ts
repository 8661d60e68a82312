import { z } from 'zod'
import { readingBatchAnswer, readingRow, typedReading, typedReadingAnswer } from '@/lib/room/reading-contract'
import type { DoorDescription } from '@/lib/server/doors/door'
import { LARGEST_READINGS_BYTES, SENSOR_REQUESTS_PER_MINUTE } from '@/lib/server/limits'

/** Stricter than the door, which checks row by row so that one bad row does not cost the others. */
const readings = z.strictObject({ readings: z.array(readingRow).min(1).max(10_000) })

export const READING_DOORS: readonly DoorDescription[] = [
  {
    operationId: 'sendReadings',
    method: 'POST',
    path: '/api/v1/readings',
    group: 'Readings',
    summary: 'Send readings of one sensor',
    text: 'One reading or up to 10,000, oldest or newest first. Good rows are kept; each bad one is answered with its index and the reason, and the answer is still 200. A row with an instant that is known already changes nothing, so a batch whose answer got lost is simply sent again. Rows may be up to 31 days late and 2 minutes ahead.',
    who: 'sensor',
    body: {
      schema: readings,
      largestBytes: LARGEST_READINGS_BYTES,
      example: {
        readings: [
          { measuredAt: '2026-10-13T09:00:00Z', airTempC: 21.4, relHumidityPct: 52.5 },
          { measuredAt: 1_791_882_300_000, airTempC: 21.5, relHumidityPct: 52.1 },
        ],
      },
    },
    answers: {
      200: {
        text: 'What became of the rows.',
        schema: readingBatchAnswer,
        example: { accepted: 1, repeated: 0, rejected: [{ index: 1, reason: 'airTempC: A shell room is not hotter than 60 °C.' }] },
      },
    },
    limit: { requests: SENSOR_REQUESTS_PER_MINUTE, per: 'token' },
  },
  {
    operationId: 'typeReading',
    method: 'POST',
    path: '/api/v1/readings/typed',
    group: 'Readings',
    summary: 'Enter a reading of the wall hygrometer',
    text: 'It counts from now on, or from `measuredAt`, and holds until the next reading, 12 hours at most. `measuredAt` may be 31 days back and 2 minutes ahead.',
    who: 'read',
    body: {
      schema: typedReading,
      example: { operationId: '0b9f3a52-6c1d-4a57-9f0e-2f8f5f4f7a11', sensorId: 1, airTempC: 20.5, relHumidityPct: 55 },
    },
    answers: { 201: { text: 'Kept.', schema: typedReadingAnswer, example: { sensorId: 1, measuredAt: 1_791_882_000_000 } } },
    problems: ['not_found', 'unprocessable'],
  },
]
