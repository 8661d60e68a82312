import { QueryTypes } from 'sequelize'
import { database } from '@/models'

/** What sensors told beside the air. */
export type SensorNote = {
  sensorId: number
  batteryPct: number | null
  /** Of the newest reading, Pa; null where no barometer came with it. */
  pressurePa: number | null
}

/** Battery and barometer of the sensors in use. */
export async function loadSensorNotes({ now }: { now: number }): Promise<SensorNote[]> {
  return database.query<SensorNote>(
    `SELECT s.id AS sensorId, s.battery_pct AS batteryPct,
            (SELECT r.pressure_pa FROM readings r WHERE r.sensor_id = s.id AND r.measured_at <= :now ORDER BY r.measured_at DESC LIMIT 1) AS pressurePa
       FROM sensors s WHERE s.retired_at IS NULL ORDER BY s.id`,
    { type: QueryTypes.SELECT, replacements: { now } },
  )
}
