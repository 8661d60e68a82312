import { millisecondsInHour } from 'date-fns/constants'
import { Op } from 'sequelize'
import { hourDoses, hourStartOf } from '@/lib/drying/dose-hours'
import { roomSegments } from '@/lib/drying/room-segments'
import type { RoomReading } from '@/lib/drying/types'
import { loadReadingsInRange } from '@/lib/queries/load-climate'
import { windowsAround } from '@/lib/room/windows'
import { DoseHour } from '@/models'

/** Changes closer together than this are worked out in one go. */
const TOGETHER_MS = 3 * millisecondsInHour

/**
 * Works out anew the hours that a change of readings touches: from the reading before each of these instants to the one after it; no
 * other hour can change. Takes part in the caller's transaction.
 */
export async function rewriteHours(sensorId: number, changedAt: readonly number[]): Promise<void> {
  for (const { from, to } of windowsAround(changedAt, { before: 0, after: TOGETHER_MS })) {
    await rewriteBetween(sensorId, from, to - TOGETHER_MS)
  }
}

async function rewriteBetween(sensorId: number, first: number, last: number): Promise<void> {
  const touched = await loadReadingsInRange(sensorId, first, last + 1)
  const [oldest, newest] = [touched[0], touched.at(-1)]
  // Before the first reading and after the last one no hour has a row, whichever way the readings came and went.
  if (!oldest || !newest) {
    await DoseHour.destroy({ where: { sensorId } })
    return
  }
  const fromHour = hourStartOf(oldest.measuredAt)
  const toHour = hourStartOf(newest.measuredAt) + millisecondsInHour
  if (oldest.measuredAt >= first) await DoseHour.destroy({ where: { sensorId, hourStart: { [Op.lt]: fromHour } } })
  if (newest.measuredAt <= last) await DoseHour.destroy({ where: { sensorId, hourStart: { [Op.gte]: toHour } } })
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
