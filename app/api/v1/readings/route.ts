import { noteSender } from '@/lib/commands/note-sender'
import { recordReadings } from '@/lib/commands/record-readings'
import { checkRows, senderClock } from '@/lib/room/check-rows'
import { readingBatch, type ReadingBatchAnswer } from '@/lib/room/reading-contract'
import { REASON_SENTENCES } from '@/lib/room/reading-marks'
import { sensorRoute } from '@/lib/server/api'
import { LARGEST_READINGS_BYTES } from '@/lib/server/limits'
import { readJson } from '@/lib/server/read-json'

/** Readings of one sensor, by its own token. Every reading is kept; each row that is none is answered with its index and the reason. */
export const POST = sensorRoute(async ({ request, sensor: { sensorId }, clock }) => {
  const { readings, sentAt, batteryPct } = await readJson(request, readingBatch, { maxBytes: LARGEST_READINGS_BYTES })
  const now = clock.now()
  const { rows, indexes, rejected, newestAt } = checkRows(readings, now)
  const clockOffsetSeconds = senderClock({ sentAt, newestAt, now })
  await noteSender(sensorId, { batteryPct, clockOffsetSeconds }, { clock })
  const { added, repeated, marks } = await recordReadings({ sensorId, source: 'sensor', enteredBy: null, rows }, { clock })
  const marked = marks.flatMap((mark, row) => (mark === null ? [] : [{ index: indexes[row] ?? 0, reason: REASON_SENTENCES[mark] }]))
  const answer: ReadingBatchAnswer = { accepted: added, repeated, rejected, marked, clockOffsetSeconds: clockOffsetSeconds ?? null }
  return Response.json(answer)
})
