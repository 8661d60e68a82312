import type { Job } from '@/jobs/job'
import { correctReadings } from '@/lib/commands/correct-readings'
import { loadSensorsToCorrect } from '@/lib/queries/sensors-to-correct'

/** Between two pieces: as long as a writer that waits for its turn may sleep before it looks again. */
const PAUSE_MS = 100

/** Every minute: brings the readings of sensors whose offsets were changed to them, piece by piece, so that no dip waits for all of them. */
export function bringToOffsets({ pause }: { pause: (milliseconds: number) => Promise<unknown> }): Job {
  return {
    name: 'correct-readings',
    schedule: '20 * * * * *',
    run: async ({ clock, isStopping }) => {
      let corrected = 0
      for (const sensorId of await loadSensorsToCorrect()) {
        for (let hasMore = true; hasMore && !isStopping();) {
          const piece = await correctReadings(sensorId, clock.now())
          corrected += piece.changed
          ;({ hasMore } = piece)
          if (hasMore) await pause(PAUSE_MS)
        }
      }
      return { corrected }
    },
  }
}
