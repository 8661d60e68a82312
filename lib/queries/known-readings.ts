import { QueryTypes } from 'sequelize'
import type { Air, ReadingSource } from '@/lib/drying/types'
import { database } from '@/models'

/** A reading within range as the device said it, whether it counts or not. */
export type KnownReading = Air & {
  measuredAt: number
  source: ReadingSource
  enteredBy: string | null
  receivedAt: number
  pressurePa: number | null
  altitudePressurePa: number | null
  /** Null where it counts. */
  setAside: 'jump' | 'flat' | null
}

/** Everything within range that one sensor has told in [from, to], in order. */
export async function loadKnownReadings(sensorId: number, from: number, to: number): Promise<KnownReading[]> {
  return database.query<KnownReading>(
    `SELECT measured_at AS measuredAt, coalesce(raw_air_temp_c, air_temp_c) AS airTempC,
            coalesce(raw_rel_humidity_pct, rel_humidity_pct) AS relHumidityPct, source, entered_by AS enteredBy, received_at AS receivedAt,
            pressure_pa AS pressurePa, altitude_pressure_pa AS altitudePressurePa, NULL AS setAside
       FROM readings WHERE sensor_id = :sensorId AND measured_at BETWEEN :from AND :to
      UNION ALL
     SELECT measured_at, air_temp_c, rel_humidity_pct, source, entered_by, received_at, pressure_pa, altitude_pressure_pa, reason
       FROM set_aside_readings WHERE sensor_id = :sensorId AND measured_at BETWEEN :from AND :to AND reason <> 'out of range'
      ORDER BY measuredAt`,
    { type: QueryTypes.SELECT, replacements: { sensorId, from, to } },
  )
}
