import { QueryTypes } from 'sequelize'
import type { Air } from '@/lib/drying/types'
import type { KnownReading } from '@/lib/queries/known-readings'
import { database } from '@/models'

/** A reading as the device said it, with the air that counts for it so far. */
export type ReadingToCorrect = Omit<KnownReading, 'setAside'> & { counted: Air }

/** The next readings of a sensor from an instant on that count, in order, `limit` at the most. */
export async function loadReadingsToCorrect(sensorId: number, from: number, limit: number): Promise<ReadingToCorrect[]> {
  const rows = await database.query<Omit<ReadingToCorrect, 'counted'> & { countedTempC: number; countedRhPct: number }>(
    `SELECT measured_at AS measuredAt, coalesce(raw_air_temp_c, air_temp_c) AS airTempC,
            coalesce(raw_rel_humidity_pct, rel_humidity_pct) AS relHumidityPct, source, entered_by AS enteredBy, received_at AS receivedAt,
            pressure_pa AS pressurePa, altitude_pressure_pa AS altitudePressurePa, air_temp_c AS countedTempC, rel_humidity_pct AS countedRhPct
       FROM readings WHERE sensor_id = :sensorId AND measured_at >= :from ORDER BY measured_at LIMIT :limit`,
    { type: QueryTypes.SELECT, replacements: { sensorId, from, limit } },
  )
  return rows.map(({ countedTempC, countedRhPct, ...reading }) => ({
    ...reading,
    counted: { airTempC: countedTempC, relHumidityPct: countedRhPct },
  }))
}
