import { QueryTypes } from 'sequelize'
import { hourStartOf } from '@/lib/drying/dose-hours'
import type { ReadingSource, RoomReading } from '@/lib/drying/types'
import type { ClimateHour, ClimateRows } from '@/lib/room/climate'
import { database } from '@/models'

type HourRow = {
  hourStart: number
  doseLikely: number
  doseLow: number
  doseHigh: number
  coveredMinutes: number
  gapMinutes: number
  hasTyped: number
  typedCount: number
  readingCount: number
  meanAirTempC: number | null
  minAirTempC: number | null
  maxAirTempC: number | null
  meanRelHumidityPct: number | null
  maxRelHumidityPct: number | null
}

const HOUR_COLUMNS = `hour_start AS hourStart, dose_likely AS doseLikely, dose_low AS doseLow, dose_high AS doseHigh,
  covered_minutes AS coveredMinutes, gap_minutes AS gapMinutes, has_typed AS hasTyped, typed_count AS typedCount, reading_count AS readingCount,
  mean_air_temp_c AS meanAirTempC, min_air_temp_c AS minAirTempC, max_air_temp_c AS maxAirTempC,
  mean_rel_humidity_pct AS meanRelHumidityPct, max_rel_humidity_pct AS maxRelHumidityPct`

const READING_COLUMNS = `r.measured_at AS measuredAt, r.air_temp_c AS airTempC, r.rel_humidity_pct AS relHumidityPct, r.room_factor AS roomFactor, r.source`

const climateHour = ({ doseLikely, doseLow, doseHigh, hasTyped, ...row }: HourRow): ClimateHour => ({
  ...row,
  dose: { likely: doseLikely, low: doseLow, high: doseHigh },
  hasTyped: hasTyped === 1,
})

/** Hourly rows of a sensor in [from, to), in order. */
export async function loadHours(sensorId: number, from: number, to: number): Promise<ClimateHour[]> {
  const rows = await database.query<HourRow>(
    `SELECT ${HOUR_COLUMNS} FROM dose_hours WHERE sensor_id = :sensorId AND hour_start >= :from AND hour_start < :to ORDER BY hour_start`,
    { type: QueryTypes.SELECT, replacements: { sensorId, from, to } },
  )
  return rows.map(climateHour)
}

/** The newest reading of a sensor at or before an instant. */
async function loadNewestReading(sensorId: number, at: number): Promise<RoomReading | null> {
  const [row] = await database.query<RoomReading & { source: ReadingSource }>(
    `SELECT ${READING_COLUMNS} FROM readings r WHERE r.sensor_id = :sensorId AND r.measured_at <= :at ORDER BY r.measured_at DESC LIMIT 1`,
    { type: QueryTypes.SELECT, replacements: { sensorId, at } },
  )
  return row ?? null
}

/** Exact readings in some UTC hours of a sensor, with the nearest one before and after each hour. Costs by the hours asked for. */
export async function loadReadingsInHours(sensorId: number, hours: readonly number[]): Promise<RoomReading[]> {
  if (hours.length === 0) return []
  return database.query<RoomReading>(
    // CROSS JOIN keeps the hours outside: the other way round every reading of the sensor would be looked at.
    `WITH spans AS MATERIALIZED (
       SELECT coalesce((SELECT max(b.measured_at) FROM readings b WHERE b.sensor_id = :sensorId AND b.measured_at < h.value), h.value) AS first,
              coalesce((SELECT min(a.measured_at) FROM readings a WHERE a.sensor_id = :sensorId AND a.measured_at >= h.value + 3600000), h.value + 3600000) AS last
         FROM json_each(:hours) h)
     SELECT DISTINCT ${READING_COLUMNS} FROM spans CROSS JOIN readings r
         ON r.sensor_id = :sensorId AND r.measured_at BETWEEN spans.first AND spans.last
      ORDER BY r.measured_at`,
    { type: QueryTypes.SELECT, replacements: { hours: JSON.stringify([...new Set(hours)]), sensorId } },
  )
}

/** Readings of a sensor in [from, to), with the nearest one before and after, in order. */
export async function loadReadingsInRange(sensorId: number, from: number, to: number): Promise<RoomReading[]> {
  return database.query<RoomReading>(
    `SELECT ${READING_COLUMNS} FROM readings r
      WHERE r.sensor_id = :sensorId
        AND r.measured_at >= coalesce((SELECT max(measured_at) FROM readings WHERE sensor_id = :sensorId AND measured_at < :from), :from)
        AND r.measured_at <= coalesce((SELECT min(measured_at) FROM readings WHERE sensor_id = :sensorId AND measured_at >= :to), :to)
      ORDER BY r.measured_at`,
    { type: QueryTypes.SELECT, replacements: { sensorId, from, to } },
  )
}

/**
 * What the drying clock needs of one sensor: its hours since `from`, its newest reading, and the exact readings of the hours that matter.
 *
 * @param known an earlier answer for the same moment: only the readings are asked for again.
 */
export async function loadClimateRows(
  sensorId: number,
  from: number,
  now: number,
  refinedHours: readonly number[],
  known?: ClimateRows,
): Promise<ClimateRows> {
  const newest = known ? known.newest : await loadNewestReading(sensorId, now)
  const refined = [...new Set([...refinedHours, hourStartOf(newest?.measuredAt ?? now)])]
  const [hours, readings] = await Promise.all([
    known?.hours ?? loadHours(sensorId, hourStartOf(from), hourStartOf(now) + 3_600_000),
    loadReadingsInHours(sensorId, refined),
  ])
  return { sensorId, hours, readings: readings.filter((reading) => reading.measuredAt <= now), refinedHours: refined, newest }
}
