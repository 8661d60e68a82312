import { millisecondsInHour } from 'date-fns/constants'
import { dewPointC, vaporPressureDeficitPa } from '@/lib/drying/air'
import { wetBulbDepressionK } from '@/lib/drying/room-factor'
import type { Dose } from '@/lib/drying/types'
import type { RoomClimate } from '@/lib/room/climate'
import { hourPoint, type RoomPoint } from '@/lib/room/series'

/**
 * The hourly rows of a stretch of time together. Temperatures degC, humidity %. Means are weighed by the minutes for which their
 * hours speak; the lowest humidity is that of the driest hour's mean. Null where nothing was read.
 */
export type ClimateSpan = {
  from: number
  to: number
  dose: Dose
  coveredMinutes: number
  gapMinutes: number
  hasTyped: boolean
  readingCount: number
  typedCount: number
  meanAirTempC: number | null
  minAirTempC: number | null
  maxAirTempC: number | null
  meanRelHumidityPct: number | null
  minRelHumidityPct: number | null
  maxRelHumidityPct: number | null
  /** Read minutes of hours whose mean lies outside the foundry's band. */
  outOfTempMinutes: number
  outOfRhMinutes: number
}

/** A day of which less is covered tells nothing of its speed. */
const FEWEST_MINUTES = 60

/** A day's own figures, from the least to the most; those that rest on both temperature and humidity are of its mean air. */
export function dayPoint(day: ClimateSpan, pressurePa: number): RoomPoint {
  const { meanAirTempC, meanRelHumidityPct, coveredMinutes, gapMinutes, dose } = day
  const air = meanAirTempC === null || meanRelHumidityPct === null ? null : { airTempC: meanAirTempC, relHumidityPct: meanRelHumidityPct }
  const gapK = air && wetBulbDepressionK(air, pressurePa)
  const hours = coveredMinutes / 60
  return {
    at: (day.from + day.to) / 2,
    kind: 'day',
    airTempC:
      meanAirTempC === null ? null : { likely: meanAirTempC, low: day.minAirTempC ?? meanAirTempC, high: day.maxAirTempC ?? meanAirTempC },
    relHumidityPct:
      meanRelHumidityPct === null
        ? null
        : {
            likely: meanRelHumidityPct,
            low: day.minRelHumidityPct ?? meanRelHumidityPct,
            high: day.maxRelHumidityPct ?? meanRelHumidityPct,
          },
    wetBulbGapK: gapK === null ? null : { likely: gapK, low: gapK, high: gapK },
    speed: coveredMinutes < FEWEST_MINUTES ? null : { likely: dose.likely / hours, low: dose.low / hours, high: dose.high / hours },
    dewPointC: air && dewPointC(air),
    vaporPressureDeficitPa: air && vaporPressureDeficitPa(air),
    isGap: gapMinutes > 0,
    isTyped: day.hasTyped,
    readMinutes: coveredMinutes - gapMinutes,
  }
}

/** A fortnight of hours, one point each, from the hourly table alone. */
export function hourSeries(climate: RoomClimate, { from, to }: { from: number; to: number }, pressurePa: number): RoomPoint[] {
  const middle = millisecondsInHour / 2
  return climate.hours
    .filter(({ hourStart }) => hourStart + middle >= from && hourStart + middle <= to)
    .map((hour) => hourPoint(hour, pressurePa))
}
