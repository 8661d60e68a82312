import { millisecondsInHour, millisecondsInMinute } from 'date-fns/constants'
import { hourStartOf, segmentsFromHours, spliceCurve } from '@/lib/drying/dose-hours'
import { forecastSegments } from '@/lib/drying/forecast'
import { indexCurve } from '@/lib/drying/room-curve'
import { holdsUntil, onePerInstant, roomSegments } from '@/lib/drying/room-segments'
import type { DoseHour, RoomCurve, RoomReading } from '@/lib/drying/types'

/** A row of the hourly table with the plain figures of the hour's own readings. */
export type ClimateHour = DoseHour & {
  readingCount: number
  typedCount: number
  meanAirTempC: number | null
  minAirTempC: number | null
  maxAirTempC: number | null
  meanRelHumidityPct: number | null
  maxRelHumidityPct: number | null
}

/** What is known of one sensor's air. */
export type RoomClimate = {
  sensorId: number
  /** Readings up to now, the forecast from now on: one array, so that every tree shares its sums. */
  curve: RoomCurve
  hours: readonly ClimateHour[]
  /** Readings of the refined hours and their neighbours, in order; elsewhere an hour's mean stands for it. */
  exact: readonly RoomReading[]
  /** UTC hours of which every reading is among the exact ones. Of any other hour there may be a neighbour only. */
  refinedHours: ReadonlySet<number>
  newest: RoomReading | null
  isStale: boolean
}

/** How far ahead the clock looks. */
export const HORIZON_HOURS = 14 * 24

export type ClimateRows = {
  sensorId: number
  hours: readonly ClimateHour[]
  /** Readings in `refinedHours`, with the nearest one before and after each, in any order. */
  readings: readonly RoomReading[]
  /** UTC hours in which the exact readings were asked for. */
  refinedHours: readonly number[]
  newest: RoomReading | null
}

/**
 * One room's curve from the hourly table, with exact readings in the hours that matter and since the newest whole hour,
 * and the forecast behind it.
 */
export function buildClimate(rows: ClimateRows, { now, timeZone }: { now: number; timeZone: string }): RoomClimate {
  const { sensorId, hours, newest } = rows
  // The newest one is often among them already: a lone typed reading must not count as two.
  const exactReadings = onePerInstant(newest ? [...rows.readings, newest] : rows.readings)
  const tailFrom = newest ? hourStartOf(newest.measuredAt) : hourStartOf(now)
  const refined = rows.refinedHours.filter((hour) => hour < tailFrom).map((hour) => ({ from: hour, to: hour + millisecondsInHour }))
  const past = spliceCurve(segmentsFromHours(hours.filter((hour) => hour.hourStart < tailFrom)), roomSegments(exactReadings, { now }), [
    ...refined,
    { from: tailFrom, to: Math.max(now, tailFrom) },
  ]).filter((segment) => segment.from < now)
  const forecast = forecastSegments({ hours, now, timeZone, lastRoomFactor: newest?.roomFactor ?? null, horizonHours: HORIZON_HOURS })
  const curve = [...past, ...forecast]
  indexCurve(curve)
  return {
    sensorId,
    curve,
    hours,
    exact: exactReadings,
    refinedHours: new Set(rows.refinedHours),
    newest,
    isStale: newest === null || holdsUntil(newest) < now,
  }
}

/**
 * Readings for the flags: the exact ones, and for each hour that is not refined one reading in its middle that carries the
 * hour's means, beside the neighbour that may be at hand of it.
 */
export function readingsForFlags(climate: RoomClimate, from: number, to: number): RoomReading[] {
  const means = climate.hours
    .filter((hour) => hour.hourStart >= hourStartOf(from) && hour.hourStart < to && !climate.refinedHours.has(hour.hourStart))
    .flatMap((hour): RoomReading[] =>
      hour.meanAirTempC === null || hour.meanRelHumidityPct === null
        ? []
        : [
            {
              measuredAt: hour.hourStart + 30 * millisecondsInMinute,
              airTempC: hour.meanAirTempC,
              relHumidityPct: hour.meanRelHumidityPct,
              roomFactor: hour.dose.likely,
              source: hour.hasTyped ? 'typed' : 'sensor',
            },
          ],
    )
  return [...means, ...climate.exact].filter((reading) => reading.measuredAt >= from && reading.measuredAt <= to)
}

/** One room's air from one instant to another. */
export type AirStretch = { climate: RoomClimate; from: number; to: number }

/** Mean and worst humidity of some stretches: whole hours by their figures, the two end hours by their readings where those are at hand. */
export function humidityOf(stretches: readonly AirStretch[]): { meanPct: number; worstPct: number } | null {
  const figures = stretches.flatMap(({ climate, from, to }) => [
    ...climate.hours
      .filter((hour) => hour.hourStart >= from && hour.hourStart + millisecondsInHour <= to && hour.readingCount > 0)
      .map((hour) => ({ mean: hour.meanRelHumidityPct ?? 0, worst: hour.maxRelHumidityPct ?? 0, weight: hour.readingCount })),
    ...climate.exact
      .filter((reading) => {
        const hour = hourStartOf(reading.measuredAt)
        const isWholeHour = hour >= from && hour + millisecondsInHour <= to
        return reading.measuredAt >= from && reading.measuredAt <= to && !isWholeHour
      })
      .map((reading) => ({ mean: reading.relHumidityPct, worst: reading.relHumidityPct, weight: 1 })),
  ])
  const weight = figures.reduce((sum, figure) => sum + figure.weight, 0)
  if (weight === 0) return null
  return {
    meanPct: figures.reduce((sum, figure) => sum + figure.mean * figure.weight, 0) / weight,
    worstPct: Math.max(...figures.map((figure) => figure.worst)),
  }
}
