import { millisecondsInHour } from 'date-fns/constants'
import { Op } from 'sequelize'
import { markLateAir } from '@/lib/commands/mark-late-air'
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
 * other hour can change. Coats that were covered by then are marked. Takes part in the caller's transaction.
 */
export async function rewriteHours(sensorId: number, changedAt: readonly number[], now: number): Promise<void> {
  for (const { from, to } of windowsAround(changedAt, { before: 0, after: TOGETHER_MS })) {
    await rewriteBetween(sensorId, from, to - TOGETHER_MS, now)
  }
}

async function rewriteBetween(sensorId: number, first: number, last: number, now: number): Promise<void> {
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
  const former = await DoseHour.findAll({ where: { sensorId, hourStart: { [Op.between]: [fromHour, toHour - 1] } }, raw: true })
  const changedHours = rows.filter((row) =>
    isOtherDose(former.find(({ hourStart }) => hourStart === row.hourStart)?.doseLikely ?? 0, row.doseLikely),
  )
  const [firstChanged, lastChanged] = [changedHours[0], changedHours.at(-1)]
  if (firstChanged && lastChanged) {
    // A newest reading tells of the time that comes after the one before it, which nobody has been told anything of.
    const from = newest.measuredAt <= last ? first : oldest.measuredAt
    await markLateAir(sensorId, { from: Math.max(from, firstChanged.hourStart), to: lastChanged.hourStart + millisecondsInHour }, now)
  }
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

/** An hour's dose that differs by less is taken to be the same. Our own. */
const SAME_DOSE_SHARE = 0.01
const isOtherDose = (one: number, other: number): boolean => Math.abs(one - other) > SAME_DOSE_SHARE * Math.max(one, other)

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
