import { millisecondsInDay } from 'date-fns/constants'
import { QueryTypes } from 'sequelize'
import type { Clock } from '@/lib/core/clock'
import type { SensorKind } from '@/lib/room/sensor-input'
import { database, Place } from '@/models'

export type TokenRow = {
  id: string
  sensorId: number
  /** Null: Kilnward itself. */
  issuedBy: string | null
  issuedAt: number
  lastUsedAt: number | null
  revokedAt: number | null
}

export type SensorRow = {
  id: number
  name: string
  /** Demo data in a foundry that is not the demo itself. */
  isDemo: boolean
  kind: SensorKind
  retiredAt: number | null
  /** The newest reading that counts. */
  newest: { measuredAt: number; airTempC: number; relHumidityPct: number; pressurePa: number | null } | null
  batteryPct: number | null
  batteryAt: number | null
  /** How far its clock is ahead of ours; null where it goes right, or nobody knows. */
  clockOffsetSeconds: number | null
  /** Readings of the last 24 h that are kept and do not count. */
  markedCount: number
  /** Its readings are still being brought to a changed offset. */
  isCorrecting: boolean
  /** Names of the places in use that it serves. */
  places: string[]
  tokens: TokenRow[]
}

type Row = Omit<SensorRow, 'isDemo' | 'newest' | 'isCorrecting' | 'places' | 'tokens'> & {
  isDemo: number
  isCorrecting: number
  measuredAt: number | null
  airTempC: number | null
  relHumidityPct: number | null
  pressurePa: number | null
}

/** The sensors, each with its newest reading, the places it serves and its tokens; never a token's secret. */
export async function loadSensorList({ clock }: { clock: Clock }): Promise<{ inUse: SensorRow[]; retired: SensorRow[] }> {
  const now = clock.now()
  const [sensors, places, tokens] = await Promise.all([
    database.query<Row>(
      `SELECT s.id, s.name, s.is_demo AND NOT (SELECT is_demo FROM foundry) AS isDemo, s.kind, s.retired_at AS retiredAt,
              r.measured_at AS measuredAt, r.air_temp_c AS airTempC, r.rel_humidity_pct AS relHumidityPct, r.pressure_pa AS pressurePa,
              s.battery_pct AS batteryPct, s.battery_at AS batteryAt, s.clock_offset_seconds AS clockOffsetSeconds,
              s.correct_from IS NOT NULL AS isCorrecting,
              (SELECT count(*) FROM set_aside_readings a WHERE a.sensor_id = s.id AND a.measured_at BETWEEN :since AND :now) AS markedCount
         FROM sensors s
         LEFT JOIN readings r ON r.sensor_id = s.id
              AND r.measured_at = (SELECT max(measured_at) FROM readings WHERE sensor_id = s.id AND measured_at <= :now)
        ORDER BY s.name`,
      { type: QueryTypes.SELECT, replacements: { now, since: now - millisecondsInDay } },
    ),
    Place.findAll({ where: { retiredAt: null }, order: [['name', 'ASC']] }),
    database.query<TokenRow>(
      `SELECT t.id, t.sensor_id AS sensorId, m.name AS issuedBy, t.created_at AS issuedAt, t.last_used_at AS lastUsedAt,
              t.revoked_at AS revokedAt
         FROM sensor_tokens t LEFT JOIN members m ON m.id = t.created_by ORDER BY t.created_at DESC, t.id`,
      { type: QueryTypes.SELECT },
    ),
  ])
  const rows = sensors.map(({ measuredAt, airTempC, relHumidityPct, pressurePa, ...sensor }): SensorRow => ({
    ...sensor,
    isDemo: sensor.isDemo === 1,
    newest:
      measuredAt === null || airTempC === null || relHumidityPct === null ? null : { measuredAt, airTempC, relHumidityPct, pressurePa },
    isCorrecting: sensor.isCorrecting === 1,
    places: places.filter(({ sensorId }) => sensorId === sensor.id).map(({ name }) => name),
    tokens: tokens.filter(({ sensorId }) => sensorId === sensor.id),
  }))
  return { inUse: rows.filter(({ retiredAt }) => retiredAt === null), retired: rows.filter(({ retiredAt }) => retiredAt !== null) }
}
