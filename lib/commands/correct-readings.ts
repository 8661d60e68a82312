import { millisecondsInDay } from 'date-fns/constants'
import { rewriteHours } from '@/lib/commands/rewrite-hours'
import { writeReadings } from '@/lib/commands/write-readings'
import { stationPressurePa } from '@/lib/drying/air'
import { loadReadingsToCorrect } from '@/lib/queries/readings-to-correct'
import { correctedAir, offsetAt } from '@/lib/room/sensor-offsets'
import { Foundry, inTransaction, Sensor, SensorOffset } from '@/models'

/** A day and a little of five-minute readings, and no more hours than that of rare ones: a dip that is logged meanwhile waits for one such piece only. */
const READINGS_AT_ONCE = 300
const SPAN_AT_ONCE_MS = 2 * millisecondsInDay

/**
 * Brings the next few hundred readings of a sensor to its offsets, in one short transaction, with the hours that they touch.
 *
 * @returns how many readings were changed, and whether more are waiting.
 */
export function correctReadings(sensorId: number, now: number): Promise<{ changed: number; hasMore: boolean }> {
  return inTransaction(async () => {
    const sensor = await Sensor.findByPk(sensorId, { rejectOnEmpty: true })
    if (sensor.correctFrom === null) return { changed: 0, hasMore: false }
    const [foundry, offsets, waiting] = await Promise.all([
      Foundry.findByPk(1, { rejectOnEmpty: true }),
      SensorOffset.findAll({ where: { sensorId } }),
      loadReadingsToCorrect(sensorId, sensor.correctFrom, READINGS_AT_ONCE),
    ])
    const until = (waiting[0]?.measuredAt ?? 0) + SPAN_AT_ONCE_MS
    const readings = waiting.filter(({ measuredAt }) => measuredAt <= until)
    const toChange = readings.filter(({ counted, ...reading }) => {
      const air = correctedAir(reading, offsetAt(offsets, reading.measuredAt))
      return air.airTempC !== counted.airTempC || air.relHumidityPct !== counted.relHumidityPct
    })
    await writeReadings(sensorId, toChange, { offsets, pressurePa: stationPressurePa(foundry.altitudeM) })
    await rewriteHours(
      sensorId,
      toChange.map(({ measuredAt }) => measuredAt),
      now,
    )
    const last = readings.at(-1)
    const hasMore = last !== undefined && (readings.length < waiting.length || waiting.length === READINGS_AT_ONCE)
    await sensor.update({ correctFrom: hasMore ? last.measuredAt + 1 : null })
    return { changed: toChange.length, hasMore }
  })
}
