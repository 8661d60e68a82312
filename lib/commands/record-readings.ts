import { millisecondsInHour } from 'date-fns/constants'
import { QueryTypes } from 'sequelize'
import type { Clock } from '@/lib/core/clock'
import { stationPressurePa } from '@/lib/drying/air'
import { hourDoses, hourStartOf } from '@/lib/drying/dose-hours'
import { roomFactor } from '@/lib/drying/room-factor'
import { roomSegments } from '@/lib/drying/room-segments'
import type { Air, ReadingSource, RoomReading } from '@/lib/drying/types'
import { loadReadingsInRange } from '@/lib/queries/load-climate'
import { database, DoseHour, Foundry, inTransaction } from '@/models'

export type ReadingsInput = {
  sensorId: number
  source: ReadingSource
  /** The member who typed it; null from a sensor. */
  enteredBy: string | null
  /** `pressurePa`: of a barometer beside it, where there is one. */
  rows: readonly (Air & { measuredAt: number; pressurePa?: number | undefined })[]
}

/** What became of the rows: added and repeated are all of them; marked ones are kept, and count for nothing in the clock. */
export type ReadingsOutcome = { added: number; repeated: number; marked: number }

/** Stores readings of one sensor and rewrites the hours they touch; rows already known change nothing. */
export function recordReadings(
  { sensorId, source, enteredBy, rows }: ReadingsInput,
  { clock }: { clock: Clock },
): Promise<ReadingsOutcome> {
  if (rows.length === 0) return Promise.resolve({ added: 0, repeated: 0, marked: 0 })
  return inTransaction(async () => {
    const foundry = await Foundry.findByPk(1, { rejectOnEmpty: true })
    const pressurePa = stationPressurePa(foundry.altitudeM)
    const values = rows.map((row) => [row.measuredAt, row.airTempC, row.relHumidityPct, roomFactor(row, pressurePa)])
    const [, inserted] = await database.query(
      `INSERT INTO readings (sensor_id, measured_at, air_temp_c, rel_humidity_pct, room_factor, source, entered_by, received_at)
       SELECT :sensorId, value ->> 0, value ->> 1, value ->> 2, value ->> 3, :source, :enteredBy, :receivedAt FROM json_each(:values) WHERE true
       ON CONFLICT (sensor_id, measured_at) DO NOTHING`,
      { type: QueryTypes.INSERT, replacements: { sensorId, source, enteredBy, receivedAt: clock.now(), values: JSON.stringify(values) } },
    )
    if (inserted > 0) {
      const instants = rows.map((row) => row.measuredAt)
      await rewriteHours(
        sensorId,
        instants.reduce((a, b) => Math.min(a, b)),
        instants.reduce((a, b) => Math.max(a, b)),
      )
    }
    return { added: inserted, repeated: rows.length - inserted, marked: 0 }
  })
}

/** Rewrites the hours from the reading before `first` to the reading after `last`; no other hour can change. */
async function rewriteHours(sensorId: number, first: number, last: number): Promise<void> {
  const touched = await loadReadingsInRange(sensorId, first, last + 1)
  const fromHour = hourStartOf(touched[0]?.measuredAt ?? first)
  const toHour = hourStartOf(touched.at(-1)?.measuredAt ?? last) + millisecondsInHour
  const readings = await loadReadingsInRange(sensorId, fromHour, toHour)
  const curve = roomSegments(readings, { now: readings.at(-1)?.measuredAt ?? last })
  const inHour = new Map<number, RoomReading[]>()
  for (const reading of readings) {
    const hour = hourStartOf(reading.measuredAt)
    const group = inHour.get(hour)
    if (group) group.push(reading)
    else inHour.set(hour, [reading])
  }
  const rows = hourDoses(curve, fromHour, toHour).map((hour) => ({
    sensorId,
    hourStart: hour.hourStart,
    doseLikely: hour.dose.likely,
    doseLow: hour.dose.low,
    doseHigh: hour.dose.high,
    coveredMinutes: hour.coveredMinutes,
    gapMinutes: hour.gapMinutes,
    hasTyped: hour.hasTyped,
    ...figures(inHour.get(hour.hourStart) ?? []),
  }))
  await DoseHour.bulkCreate(rows, {
    updateOnDuplicate: [
      'doseLikely',
      'doseLow',
      'doseHigh',
      'coveredMinutes',
      'gapMinutes',
      'hasTyped',
      'typedCount',
      'readingCount',
      'meanAirTempC',
      'minAirTempC',
      'maxAirTempC',
      'meanRelHumidityPct',
      'maxRelHumidityPct',
    ],
  })
}

const mean = (values: readonly number[]) => values.reduce((sum, value) => sum + value, 0) / values.length

function figures(readings: readonly RoomReading[]) {
  const typedCount = readings.filter((reading) => reading.source === 'typed').length
  if (readings.length === 0) {
    return {
      readingCount: 0,
      typedCount,
      meanAirTempC: null,
      minAirTempC: null,
      maxAirTempC: null,
      meanRelHumidityPct: null,
      maxRelHumidityPct: null,
    }
  }
  const temperatures = readings.map((reading) => reading.airTempC)
  const humidities = readings.map((reading) => reading.relHumidityPct)
  return {
    readingCount: readings.length,
    typedCount,
    meanAirTempC: mean(temperatures),
    minAirTempC: Math.min(...temperatures),
    maxAirTempC: Math.max(...temperatures),
    meanRelHumidityPct: mean(humidities),
    maxRelHumidityPct: Math.max(...humidities),
  }
}
