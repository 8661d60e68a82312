import { QueryTypes } from 'sequelize'
import type { Clock } from '@/lib/core/clock'
import type { ReadingSource } from '@/lib/drying/types'
import { loadSensorList, type SensorRow } from '@/lib/queries/sensor-list'
import type { SetAsideReason } from '@/lib/room/reading-marks'
import { database } from '@/models'

/** Far more than anybody looks through. */
const MOST_MARKED = 50
const MOST_LINES = 50

export type MarkedReading = {
  measuredAt: number
  reason: SetAsideReason
  airTempC: number
  relHumidityPct: number
  source: ReadingSource
}

/** `by`: null is Kilnward itself, or somebody who is gone. */
export type OffsetLine = {
  id: string
  since: number
  airTempOffsetK: number
  relHumidityOffsetPct: number
  note: string
  by: string | null
  enteredAt: number
}

export type DeviceLine = { id: string; since: number; serial: string; note: string; by: string | null }

export type SensorDetail = {
  sensor: SensorRow
  /** The newest readings that do not count. */
  marked: MarkedReading[]
  /** Newest first. */
  offsets: OffsetLine[]
  devices: DeviceLine[]
}

/** One sensor with its offsets, its devices and what it sent that does not count; null where there is none. */
export async function loadSensorDetail(sensorId: number, { clock }: { clock: Clock }): Promise<SensorDetail | null> {
  const { inUse, retired } = await loadSensorList({ clock })
  const sensor = [...inUse, ...retired].find(({ id }) => id === sensorId)
  if (!sensor) return null
  const select = <Row extends object>(sql: string) =>
    database.query<Row>(sql, { type: QueryTypes.SELECT, replacements: { sensorId, now: clock.now() } })
  const [marked, offsets, devices] = await Promise.all([
    select<MarkedReading>(
      `SELECT measured_at AS measuredAt, reason, air_temp_c AS airTempC, rel_humidity_pct AS relHumidityPct, source FROM set_aside_readings
        WHERE sensor_id = :sensorId AND measured_at <= :now ORDER BY measured_at DESC LIMIT ${MOST_MARKED}`,
    ),
    select<OffsetLine>(
      `SELECT o.id, o.since, o.air_temp_offset_k AS airTempOffsetK, o.rel_humidity_offset_pct AS relHumidityOffsetPct, o.note,
              m.name AS by, o.entered_at AS enteredAt
         FROM sensor_offsets o LEFT JOIN members m ON m.id = o.entered_by
        WHERE o.sensor_id = :sensorId ORDER BY o.since DESC LIMIT ${MOST_LINES}`,
    ),
    select<DeviceLine>(
      `SELECT d.id, d.since, d.serial, d.note, m.name AS by FROM sensor_devices d LEFT JOIN members m ON m.id = d.noted_by
        WHERE d.sensor_id = :sensorId ORDER BY d.since DESC LIMIT ${MOST_LINES}`,
    ),
  ])
  return { sensor, marked, offsets, devices }
}
