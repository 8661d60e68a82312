import { describedBatch, readingBatchAnswer, typedReading, typedReadingAnswer } from '@/lib/room/reading-contract'
import { REASON_SENTENCES } from '@/lib/room/reading-marks'
import type { DoorDescription } from '@/lib/server/doors/door'
import { LARGEST_READINGS_BYTES, SENSOR_REQUESTS_PER_MINUTE } from '@/lib/server/limits'

export const READING_DOORS: readonly DoorDescription[] = [
  {
    operationId: 'sendReadings',
    method: 'POST',
    path: '/api/v1/readings',
    group: 'Readings',
    summary: 'Send readings of one sensor',
    text: 'One reading or up to 10,000, in any order. Each row that is no reading is answered with its index and the reason, and the answer is still 200. A row that is known already changes nothing, so a batch whose answer got lost is simply sent again; of two rows of one instant that contradict each other the damper one stands. Rows may be up to 31 days late and 2 minutes ahead. Air outside −10 to 60 °C or 0 to 105 % RH, a jump of more than 10 K or 40 % RH away from the readings before and after it within 5 minutes, and readings that have not moved for more than 6 hours are kept, shown and answered under `marked`, and count for nothing in the drying times. What is a jump shows only with the reading after it.',
    who: 'sensor',
    body: {
      schema: describedBatch,
      largestBytes: LARGEST_READINGS_BYTES,
      example: {
        readings: [
          { measuredAt: '2026-10-13T09:00:00Z', airTempC: 21.4, relHumidityPct: 52.5 },
          { measuredAt: 1_791_882_300_000, airTempC: 215, relHumidityPct: 52.1, pressurePa: 100_900 },
          { measuredAt: '2027-10-13T09:10:00Z', airTempC: 21.5, relHumidityPct: 52.1 },
        ],
        sentAt: '2026-10-13T09:10:02Z',
        batteryPct: 86,
      },
    },
    answers: {
      200: {
        text: 'What became of the rows.',
        schema: readingBatchAnswer,
        example: {
          accepted: 2,
          repeated: 0,
          rejected: [{ index: 2, reason: 'measuredAt lies more than 2 min ahead: check the clock of the sensor.' }],
          marked: [{ index: 1, reason: REASON_SENTENCES['out of range'] }],
          clockOffsetSeconds: null,
        },
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
