import { millisecondsInMinute } from 'date-fns/constants'
import { QueryTypes } from 'sequelize'
import { hourStartOf } from '@/lib/drying/dose-hours'
import { loadClimateSpans } from '@/lib/queries/climate-spans'
import type { RoomClimate } from '@/lib/room/climate'
import { addBandHours, bandByReadings, type Band, type BandHours } from '@/lib/room/out-of-band'
import { database } from '@/models'

/**
 * How long a room was outside the foundry's band, and unread, from some instants up to now; null where nothing of that time has been
 * read yet. Counts from the room's first reading on, whole hours by the hourly table and the newest by their readings.
 */
export async function loadBandHours(
  climate: RoomClimate,
  froms: readonly number[],
  { band, now }: { band: Band; now: number },
): Promise<(BandHours | null)[]> {
  const first = await firstHourOf(climate.sensorId)
  if (first === null) return froms.map(() => null)
  // How long the newest reading holds stands in no row yet.
  const tailFrom = hourStartOf(climate.newest?.measuredAt ?? now)
  const starts = froms.map((from) => Math.max(hourStartOf(from), first))
  const rows = await loadClimateSpans(
    climate.sensorId,
    starts.map((from) => ({ from, to: Math.max(from, tailFrom) })),
    band,
  )
  return rows.map(({ from, to, coveredMinutes, gapMinutes, outOfTempMinutes, outOfRhMinutes }): BandHours => {
    const whole = {
      elapsedMs: to - from,
      outOfTempMs: outOfTempMinutes * millisecondsInMinute,
      outOfRhMs: outOfRhMinutes * millisecondsInMinute,
      unreadMs: Math.max(0, to - from - (coveredMinutes - gapMinutes) * millisecondsInMinute),
    }
    return addBandHours(whole, bandByReadings(climate.exact, band, { from: to, to: now }))
  })
}

async function firstHourOf(sensorId: number): Promise<number | null> {
  const [row] = await database.query<{ first: number | null }>(
    'SELECT min(hour_start) AS first FROM dose_hours WHERE sensor_id = :sensorId',
    {
      type: QueryTypes.SELECT,
      replacements: { sensorId },
    },
  )
  return row?.first ?? null
}
