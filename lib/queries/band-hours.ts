import { millisecondsInMinute } from 'date-fns/constants'
import { QueryTypes } from 'sequelize'
import { hourStartOf } from '@/lib/drying/dose-hours'
import { loadClimateSpans } from '@/lib/queries/climate-spans'
import type { RoomClimate } from '@/lib/room/climate'
import { addBandHours, bandOfThisHour, type Band, type BandHours } from '@/lib/room/out-of-band'
import { database } from '@/models'

/**
 * How long a room was outside the foundry's band, and unread, from some instants up to now; null where nothing of that time has been
 * read yet. Counts from the room's first reading on, whole hours by the hourly table and this hour by its readings.
 */
export async function loadBandHours(
  climate: RoomClimate,
  froms: readonly number[],
  { band, now }: { band: Band; now: number },
): Promise<(BandHours | null)[]> {
  const first = await firstHourOf(climate.sensorId)
  if (first === null) return froms.map(() => null)
  const spans = froms.map((from) => ({ from: Math.max(hourStartOf(from), first), to: hourStartOf(now) }))
  const rows = await loadClimateSpans(climate.sensorId, spans, band)
  const present = bandOfThisHour(climate.exact, band, now)
  return rows.map((row): BandHours => {
    const elapsedMs = Math.max(0, row.to - row.from)
    const whole = {
      elapsedMs,
      outOfTempMs: row.outOfTempMinutes * millisecondsInMinute,
      outOfRhMs: row.outOfRhMinutes * millisecondsInMinute,
      unreadMs: Math.max(0, elapsedMs - (row.coveredMinutes - row.gapMinutes) * millisecondsInMinute),
    }
    return addBandHours(whole, present)
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
