import { millisecondsInHour, millisecondsInMinute } from 'date-fns/constants'
import { dewPointC, vaporPressureDeficitPa } from '@/lib/drying/air'
import { hourStartOf, meanRoomFactor } from '@/lib/drying/dose-hours'
import { forecastHours, type ForecastHour } from '@/lib/drying/forecast'
import { wetBulbDepressionK } from '@/lib/drying/room-factor'
import type { Air, RoomReading } from '@/lib/drying/types'
import type { ClimateHour, RoomClimate } from '@/lib/room/climate'

/** The page shows a day back and a day ahead. */
export const BACK_HOURS = 24
export const AHEAD_HOURS = 24

/** In the newest hours every reading is drawn, before them the mean of each hour. */
const EXACT_HOURS = 2
const MOST_EXACT = 36

/** An hour of which less is covered tells nothing of its speed. */
const FEWEST_MINUTES = 15

/** A figure with its bounds; all three are one where it was measured without a gap. */
export type Figure = { likely: number; low: number; high: number }

/**
 * One point of the charts of a room. `at` is the middle of a day or an hour, the instant of a reading, or now; temperatures degC, humidity
 * %, gap of air and wet bulb K, deficit Pa, speed as a share of the reference speed. Null where nothing is known.
 */
export type RoomPoint = {
  at: number
  kind: 'day' | 'hour' | 'reading' | 'now' | 'forecast'
  airTempC: Figure | null
  relHumidityPct: Figure | null
  wetBulbGapK: Figure | null
  speed: Figure | null
  dewPointC: number | null
  vaporPressureDeficitPa: number | null
  /** Readings are missing here: the speed is credited low and bounded both ways. */
  isGap: boolean
  /** It rests on a reading that a person typed, which holds for hours. */
  isTyped: boolean
  /** How much of a day was read; null of anything shorter. */
  readMinutes: number | null
}

/** Instants from which exact readings are drawn, up to now. */
export const exactFrom = (now: number): number => hourStartOf(now) - EXACT_HOURS * millisecondsInHour

/**
 * What the charts of a room draw: hourly means of the day behind, each reading of the newest hours (thinned out), now, and the
 * forecast of the day ahead. Some 90 points at most, however many readings there are.
 *
 * @param readings of the room since `exactFrom(now)`, in order.
 */
export function roomSeries(
  climate: RoomClimate,
  readings: readonly RoomReading[],
  { now, timeZone, pressurePa }: { now: number; timeZone: string; pressurePa: number },
): RoomPoint[] {
  const from = now - BACK_HOURS * millisecondsInHour
  const sharp = exactFrom(now)
  const recent = readings.filter((reading) => reading.measuredAt >= sharp && reading.measuredAt <= now)
  // Where nothing was sent lately the hours say what they know, gaps included.
  const hoursUntil = recent.length > 0 ? hourStartOf(recent[0]!.measuredAt) : now
  const past = climate.hours
    .filter(
      (hour) =>
        hour.hourStart + millisecondsInHour / 2 >= from && hour.hourStart < hoursUntil && hour.hourStart + millisecondsInHour / 2 <= now,
    )
    .map((hour) => hourPoint(hour, pressurePa))
  const step = Math.ceil(recent.length / MOST_EXACT) || 1
  const exact = recent
    .filter((_, index) => (recent.length - 1 - index) % step === 0)
    .map((reading) => readingPoint(reading, 'reading', reading.measuredAt, pressurePa))
  const present = climate.newest && !climate.isStale ? [readingPoint(climate.newest, 'now', now, pressurePa)] : []
  return [...past, ...exact, ...present, ...forecastPoints(climate, { now, timeZone, pressurePa })]
}

const single = (value: number): Figure => ({ likely: value, low: value, high: value })

/** An hour's own figures, its means as one air; no speed where too little of it is covered. */
export function hourPoint(hour: ClimateHour, pressurePa: number): RoomPoint {
  const air = meanAirOf(hour)
  const share = hour.coveredMinutes / 60
  return {
    at: hour.hourStart + millisecondsInHour / 2,
    kind: 'hour',
    ...figuresOf(air, pressurePa),
    speed:
      hour.coveredMinutes < FEWEST_MINUTES
        ? null
        : { likely: hour.dose.likely / share, low: hour.dose.low / share, high: hour.dose.high / share },
    isGap: hour.gapMinutes > 0,
    isTyped: hour.hasTyped,
    readMinutes: null,
  }
}

function meanAirOf({ meanAirTempC, meanRelHumidityPct }: ClimateHour): Air | null {
  return meanAirTempC === null || meanRelHumidityPct === null ? null : { airTempC: meanAirTempC, relHumidityPct: meanRelHumidityPct }
}

function figuresOf(air: Air | null, pressurePa: number) {
  return {
    airTempC: air && single(air.airTempC),
    relHumidityPct: air && single(air.relHumidityPct),
    wetBulbGapK: air && single(wetBulbDepressionK(air, pressurePa)),
    dewPointC: air && dewPointC(air),
    vaporPressureDeficitPa: air && vaporPressureDeficitPa(air),
  }
}

function readingPoint(reading: RoomReading, kind: 'reading' | 'now', at: number, pressurePa: number): RoomPoint {
  return {
    at,
    kind,
    ...figuresOf(reading, pressurePa),
    speed: single(reading.roomFactor),
    isGap: false,
    isTyped: reading.source === 'typed',
    readMinutes: null,
  }
}

function forecastPoints(
  { hours, newest }: RoomClimate,
  { now, timeZone, pressurePa }: { now: number; timeZone: string; pressurePa: number },
): RoomPoint[] {
  const ask = (valueOf: (hour: ClimateHour) => number | null, last: number | null) =>
    byStart(forecastHours(valueOf, { hours, now, timeZone, last, horizonHours: AHEAD_HOURS }))
  const gapOf = (hour: ClimateHour) => {
    const air = meanAirOf(hour)
    return air && wetBulbDepressionK(air, pressurePa)
  }
  const temperatures = ask((hour) => hour.meanAirTempC, newest?.airTempC ?? null)
  const humidities = ask((hour) => hour.meanRelHumidityPct, newest?.relHumidityPct ?? null)
  const gaps = ask(gapOf, newest && wetBulbDepressionK(newest, pressurePa))
  const speeds = ask(meanRoomFactor, newest?.roomFactor ?? null)
  return [...speeds.values()].map(({ from, to, ...speed }): RoomPoint => {
    const airTempC = figure(temperatures.get(from))
    const relHumidityPct = figure(humidities.get(from))
    const air = airTempC && relHumidityPct ? { airTempC: airTempC.likely, relHumidityPct: relHumidityPct.likely } : null
    return {
      at: (from + to) / 2,
      kind: 'forecast',
      airTempC,
      relHumidityPct,
      wetBulbGapK: figure(gaps.get(from)),
      speed,
      dewPointC: air && dewPointC(air),
      vaporPressureDeficitPa: air && vaporPressureDeficitPa(air),
      isGap: false,
      isTyped: false,
      readMinutes: null,
    }
  })
}

const byStart = (rows: readonly ForecastHour[]) => new Map(rows.map((row) => [row.from, row]))

const figure = (row: ForecastHour | undefined): Figure | null => (row ? { likely: row.likely, low: row.low, high: row.high } : null)

/** Two points further apart than this are not joined by a line; typed readings speak for longer. */
const LONGEST_JOIN_MS = 100 * millisecondsInMinute
const LONGEST_TYPED_JOIN_MS = 13 * millisecondsInHour
/** From one day to the next, also to a day that has only begun; a day without a reading breaks the line. */
const LONGEST_DAY_JOIN_MS = 36 * millisecondsInHour

/** One line of a chart: a figure at an instant. */
export type ChartPoint = { at: number } & Figure

/**
 * A figure's points cut into lines: where it is not known, or was not read for long, the line breaks.
 *
 * Shape: runs of at least one point each, in order; what was measured and what is forecast are runs of their own, and the
 * forecast begins with the last measured point where that is now.
 */
export function chartLines(
  points: readonly RoomPoint[],
  valueOf: (point: RoomPoint) => Figure | null,
): { isForecast: boolean; points: ChartPoint[] }[] {
  const lines: { isForecast: boolean; points: ChartPoint[] }[] = []
  let before: RoomPoint | null = null
  for (const point of points) {
    const value = valueOf(point)
    if (value === null) continue
    const isForecast = point.kind === 'forecast'
    const line = lines.at(-1)
    // An hour for which it only held has no air of its own: what follows was not read.
    const isTypedReading = before?.isTyped === true && before.airTempC !== null
    const longest = point.kind === 'day' ? LONGEST_DAY_JOIN_MS : isTypedReading ? LONGEST_TYPED_JOIN_MS : LONGEST_JOIN_MS
    const follows = before !== null && point.at - before.at <= longest
    if (line && follows && line.isForecast === isForecast) line.points.push({ at: point.at, ...value })
    else {
      const joint = line && follows && before?.kind === 'now' ? [line.points.at(-1)!] : []
      lines.push({ isForecast, points: [...joint, { at: point.at, ...value }] })
    }
    before = point
  }
  return lines
}
