import { QueryTypes } from 'sequelize'
import { roomFactor } from '@/lib/drying/room-factor'
import type { KnownReading } from '@/lib/queries/known-readings'
import { correctedAir, offsetAt, type SensorOffset } from '@/lib/room/sensor-offsets'
import { database } from '@/models'

/**
 * Writes readings that count, as the offsets have them, over what stood at their instants. Takes part in the caller's transaction and
 * leaves the hours to `rewriteHours`.
 *
 * @param how.pressurePa that of today's altitude, for readings that came before theirs was kept.
 */
export async function writeReadings(
  sensorId: number,
  readings: readonly Omit<KnownReading, 'setAside'>[],
  { offsets, pressurePa }: { offsets: readonly SensorOffset[]; pressurePa: number },
): Promise<void> {
  if (readings.length === 0) return
  const values = readings.map((reading) => {
    const air = correctedAir(reading, offsetAt(offsets, reading.measuredAt))
    const isCorrected = air.airTempC !== reading.airTempC || air.relHumidityPct !== reading.relHumidityPct
    return [
      reading.measuredAt,
      air.airTempC,
      air.relHumidityPct,
      isCorrected ? reading.airTempC : null,
      isCorrected ? reading.relHumidityPct : null,
      reading.pressurePa,
      reading.altitudePressurePa,
      roomFactor(air, reading.pressurePa ?? reading.altitudePressurePa ?? pressurePa),
      reading.source,
      reading.enteredBy,
      reading.receivedAt,
    ]
  })
  await database.query(
    `INSERT INTO readings (sensor_id, measured_at, air_temp_c, rel_humidity_pct, raw_air_temp_c, raw_rel_humidity_pct, pressure_pa,
                           altitude_pressure_pa, room_factor, source, entered_by, received_at)
     SELECT :sensorId, value ->> 0, value ->> 1, value ->> 2, value ->> 3, value ->> 4, value ->> 5, value ->> 6, value ->> 7, value ->> 8,
            value ->> 9, value ->> 10
       FROM json_each(:values) WHERE true
     ON CONFLICT (sensor_id, measured_at) DO UPDATE SET
       air_temp_c = excluded.air_temp_c, rel_humidity_pct = excluded.rel_humidity_pct, raw_air_temp_c = excluded.raw_air_temp_c,
       raw_rel_humidity_pct = excluded.raw_rel_humidity_pct, pressure_pa = excluded.pressure_pa,
       altitude_pressure_pa = excluded.altitude_pressure_pa, room_factor = excluded.room_factor, source = excluded.source,
       entered_by = excluded.entered_by, received_at = excluded.received_at`,
    { type: QueryTypes.INSERT, replacements: { sensorId, values: JSON.stringify(values) } },
  )
}
