import { QueryTypes } from 'sequelize'
import { hourStartOf } from '@/lib/drying/dose-hours'
import type { ClimateSpan } from '@/lib/room/climate-days'
import type { Band } from '@/lib/room/out-of-band'
import { database } from '@/models'

type SpanRow = Omit<ClimateSpan, 'from' | 'to' | 'dose' | 'hasTyped'> & {
  position: number
  doseLikely: number
  doseLow: number
  doseHigh: number
  hasTyped: number
}

/**
 * Hourly rows of one sensor added up over stretches of time, such as local days; one answer for each stretch, in their order.
 *
 * A stretch is made of whole UTC hours: the one that holds its beginning is the first, the one that holds its end is no longer in it.
 * Costs by the hours, never by the readings.
 */
export async function loadClimateSpans(
  sensorId: number,
  spans: readonly { from: number; to: number }[],
  band: Band,
): Promise<ClimateSpan[]> {
  const rows = await database.query<SpanRow>(
    // CROSS JOIN keeps the stretches outside, each a range of the table's key. A typed reading speaks for the hours that it holds.
    `WITH hours AS MATERIALIZED (
       SELECT s.key AS position, h.*, h.covered_minutes - h.gap_minutes AS read_minutes,
              coalesce(h.mean_air_temp_c, CASE WHEN h.has_typed = 1 THEN
                (SELECT b.mean_air_temp_c FROM dose_hours b WHERE b.sensor_id = :sensorId AND b.hour_start < h.hour_start
                    AND b.hour_start >= h.hour_start - 13 * 3600000 AND b.mean_air_temp_c IS NOT NULL ORDER BY b.hour_start DESC LIMIT 1) END) AS temp_c,
              coalesce(h.mean_rel_humidity_pct, CASE WHEN h.has_typed = 1 THEN
                (SELECT b.mean_rel_humidity_pct FROM dose_hours b WHERE b.sensor_id = :sensorId AND b.hour_start < h.hour_start
                    AND b.hour_start >= h.hour_start - 13 * 3600000 AND b.mean_rel_humidity_pct IS NOT NULL ORDER BY b.hour_start DESC LIMIT 1) END) AS rh_pct
         FROM json_each(:spans) s CROSS JOIN dose_hours h
           ON h.sensor_id = :sensorId AND h.hour_start >= json_extract(s.value, '$[0]') AND h.hour_start < json_extract(s.value, '$[1]'))
     SELECT position, sum(dose_likely) AS doseLikely, sum(dose_low) AS doseLow, sum(dose_high) AS doseHigh,
            sum(covered_minutes) AS coveredMinutes, sum(gap_minutes) AS gapMinutes, max(has_typed) AS hasTyped,
            sum(reading_count) AS readingCount, sum(typed_count) AS typedCount,
            sum(temp_c * covered_minutes) / nullif(sum(CASE WHEN temp_c IS NOT NULL THEN covered_minutes END), 0) AS meanAirTempC,
            min(coalesce(min_air_temp_c, temp_c)) AS minAirTempC, max(coalesce(max_air_temp_c, temp_c)) AS maxAirTempC,
            sum(rh_pct * covered_minutes) / nullif(sum(CASE WHEN rh_pct IS NOT NULL THEN covered_minutes END), 0) AS meanRelHumidityPct,
            min(rh_pct) AS minRelHumidityPct, max(coalesce(max_rel_humidity_pct, rh_pct)) AS maxRelHumidityPct,
            sum(CASE WHEN temp_c NOT BETWEEN :lowTempC AND :highTempC THEN read_minutes ELSE 0 END) AS outOfTempMinutes,
            sum(CASE WHEN rh_pct NOT BETWEEN :lowRhPct AND :highRhPct THEN read_minutes ELSE 0 END) AS outOfRhMinutes
       FROM hours GROUP BY position`,
    {
      type: QueryTypes.SELECT,
      replacements: { sensorId, ...band, spans: JSON.stringify(spans.map(({ from, to }) => [hourStartOf(from), hourStartOf(to)])) },
    },
  )
  const byPosition = new Map(rows.map((row) => [row.position, row]))
  return spans.map((span, position) => {
    const row = byPosition.get(position)
    if (!row) return { ...span, ...NOTHING_READ }
    const { position: _position, doseLikely, doseLow, doseHigh, hasTyped, ...figures } = row
    return { ...span, ...figures, dose: { likely: doseLikely, low: doseLow, high: doseHigh }, hasTyped: hasTyped === 1 }
  })
}

const NOTHING_READ: Omit<ClimateSpan, 'from' | 'to'> = {
  dose: { likely: 0, low: 0, high: 0 },
  coveredMinutes: 0,
  gapMinutes: 0,
  hasTyped: false,
  readingCount: 0,
  typedCount: 0,
  meanAirTempC: null,
  minAirTempC: null,
  maxAirTempC: null,
  meanRelHumidityPct: null,
  minRelHumidityPct: null,
  maxRelHumidityPct: null,
  outOfTempMinutes: 0,
  outOfRhMinutes: 0,
}
