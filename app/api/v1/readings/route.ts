import { recordReadings } from '@/lib/commands/record-readings'
import { checkRows } from '@/lib/room/check-rows'
import { readingBatch, type ReadingBatchAnswer } from '@/lib/room/reading-contract'
import { sensorRoute } from '@/lib/server/api'
import { LARGEST_READINGS_BYTES } from '@/lib/server/limits'
import { readJson } from '@/lib/server/read-json'

/** Readings of one sensor, by its own token. Good rows are kept; each bad one is answered with its index and the reason. */
export const POST = sensorRoute(async ({ request, sensor, clock }) => {
  const { readings } = await readJson(request, readingBatch, { maxBytes: LARGEST_READINGS_BYTES })
  const { rows, rejected } = checkRows(readings, clock.now())
  const { added: accepted, repeated } = await recordReadings(
    { sensorId: sensor.sensorId, source: 'sensor', enteredBy: null, rows },
    { clock },
  )
  return Response.json({ accepted, repeated, rejected } satisfies ReadingBatchAnswer)
})
