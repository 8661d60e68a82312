import { z } from 'zod'
import { estimateAnswer, estimateInput } from '@/lib/drying/estimate-contract'
import { TEMP_UNITS } from '@/lib/format/units'
import { roomWhatIf, roomWhatIfAnswer } from '@/lib/room/room-what-if-contract'
import { ROOM_RANGES } from '@/lib/room/range'
import type { DoorDescription } from '@/lib/server/doors/door'
import { LARGEST_READINGS_BYTES } from '@/lib/server/limits'

const DIPPED_AT = 1_791_882_000_000

export const ROOM_DOORS: readonly DoorDescription[] = [
  {
    operationId: 'estimateDrying',
    method: 'POST',
    path: '/api/v1/drying/estimate',
    group: 'Readings',
    summary: 'How a coat dries in an air',
    text: 'The drying clock itself, for an air that is sent along: one constant air, or up to 10,000 readings in any order. Two readings of one instant that say different things are refused. Doses are reference hours: one is an hour at 21 °C, 50 % RH and 1.0 m/s at sea level. `need.referenceHours` is the recipe’s; the factors raise it as they do on the floor. Times are `null` where they lie after `until`. Nothing is read from the records, and nothing written.',
    who: 'see',
    body: {
      schema: estimateInput,
      largestBytes: LARGEST_READINGS_BYTES,
      example: {
        climate: { constant: { airTempC: 24, relHumidityPct: 40 } },
        airSpeedMps: 1.5,
        altitudeM: 0,
        need: { referenceHours: 4 },
        dippedAt: DIPPED_AT,
        at: [DIPPED_AT + 3_600_000],
      },
    },
    answers: { 200: { text: 'What the clock makes of it.', schema: estimateAnswer } },
  },
  {
    operationId: 'weighRoomAir',
    method: 'POST',
    path: '/api/v1/rooms/{sensorId}/what-if',
    group: 'Readings',
    summary: 'What another air would do to a room',
    text: 'Times of every drying tree in the room of one sensor as things stand (`before`) and in another air from now on (`after`), both by the drying clock itself; how many trees are ready before the doors close and before they open next; and what that air would do to the wax. What is left out of the body stays as it is forecast. With `harms` the times are told all the same, and the air is never to be proposed. Nothing is written.',
    who: 'see',
    params: { sensorId: { schema: z.string(), text: 'Number of the sensor.' } },
    body: { schema: roomWhatIf, example: { until: 'opening', relHumidityPct: 50, airSpeedMps: 1.2 } },
    answers: { 200: { text: 'Before and after.', schema: roomWhatIfAnswer } },
    problems: ['not_found', 'unprocessable'],
  },
  {
    operationId: 'exportClimate',
    method: 'GET',
    path: '/api/v1/rooms/{sensorId}/climate.csv',
    group: 'Readings',
    summary: 'The climate of one sensor as a file',
    text: 'One line an hour: means and ends of temperature and humidity, dew point, vapour-pressure deficit, drying speed and dose. `range` is what the page of the room draws: the 24 hours behind and the forecast of the 24 ahead without it, a fortnight of hours (`14d`), or a year (`1y`) with one line a local day, from the least to the most and with the minutes outside the foundry’s band. With `from` and `to` hours of whole local days, 31 at most.',
    who: 'see',
    params: { sensorId: { schema: z.string(), text: 'Number of the sensor.' } },
    query: {
      from: { schema: z.iso.date().optional(), text: 'First local day.' },
      to: { schema: z.iso.date().optional(), text: 'Last local day.' },
      range: { schema: z.enum(ROOM_RANGES).optional(), text: 'What is drawn; not together with days.' },
      temp: { schema: z.enum(TEMP_UNITS).optional(), text: 'Unit of the temperatures; degC without it.' },
    },
    answers: {
      200: {
        text: 'One line an hour, or a day for a year; names and units of the columns in the first.',
        type: 'text/csv',
        schema: z.string(),
      },
    },
    problems: ['not_found', 'invalid_input'],
  },
]
