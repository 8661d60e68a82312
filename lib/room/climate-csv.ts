import { TZDate } from '@date-fns/tz'
import { millisecondsInDay, millisecondsInHour } from 'date-fns/constants'
import { z } from 'zod'
import { fromSi, TEMP_UNITS, type TempUnit } from '@/lib/format/units'
import type { ClimateHour } from '@/lib/room/climate'
import { hourPoint, type RoomPoint } from '@/lib/room/series'

const MOST_DAYS = 31

const day = z.iso.date('A day is written as 2026-12-18.')

/** Query of a climate file: the two drawn days with their forecast, or whole local days from one to another. */
export const climateRange = z
  .strictObject({ from: day.optional(), to: day.optional(), temp: z.enum(TEMP_UNITS).default('degC') })
  .superRefine(({ from, to }, context) => {
    if ((from === undefined) !== (to === undefined)) {
      context.addIssue({ code: 'custom', path: [from === undefined ? 'from' : 'to'], message: 'Give both days, or neither.' })
    }
    if (from === undefined || to === undefined) return
    const days = (Date.parse(to) - Date.parse(from)) / millisecondsInDay + 1
    if (days < 1) context.addIssue({ code: 'custom', path: ['to'], message: 'The last day lies before the first.' })
    if (days > MOST_DAYS) context.addIssue({ code: 'custom', path: ['to'], message: `At most ${MOST_DAYS} days at once.` })
  })
export type ClimateRange = z.output<typeof climateRange>

/** Columns of the file, units in the names. */
export function climateColumns(temp: TempUnit): string[] {
  const t = temp === 'degF' ? 'degF' : 'degC'
  return [
    'kind',
    'hour_start_utc',
    'hour_start_local',
    'sensor',
    `mean_air_temp_${t}`,
    `min_air_temp_${t}`,
    `max_air_temp_${t}`,
    'mean_rel_humidity_pct',
    'max_rel_humidity_pct',
    `dew_point_${t}`,
    'vapour_pressure_deficit_pa',
    'wet_bulb_gap_k',
    'drying_speed_pct',
    'drying_speed_low_pct',
    'drying_speed_high_pct',
    'dose_reference_hours',
    'covered_minutes',
    'gap_minutes',
    'readings',
    'typed_readings',
  ]
}

const rounded = (value: number | null | undefined, digits: number) =>
  value === null || value === undefined ? null : Math.round(value * 10 ** digits) / 10 ** digits

type RowContext = { sensorName: string; temp: TempUnit; timeZone: string; pressurePa: number }

/**
 * Rows of the file: measured hours in order, then the forecast.
 *
 * Speeds in percent of the reference speed in air of 1.0 m/s; the dose is that of the whole hour at a place factor of 1. Gap, dew point
 * and deficit are those of the hour's mean air.
 */
export function climateRows(
  hours: readonly ClimateHour[],
  forecast: readonly RoomPoint[],
  context: RowContext,
): (string | number | null)[][] {
  const { sensorName, timeZone, pressurePa } = context
  const temperature = (celsius: number | null | undefined) =>
    celsius === null || celsius === undefined ? null : rounded(fromSi(celsius, context.temp), 2)
  const when = (at: number) => [new Date(at).toISOString(), new TZDate(at, timeZone).toISOString()]
  const figures = ({ dewPointC, vaporPressureDeficitPa, wetBulbGapK, speed }: RoomPoint) => [
    temperature(dewPointC),
    rounded(vaporPressureDeficitPa, 0),
    rounded(wetBulbGapK?.likely, 2),
    rounded(speed && speed.likely * 100, 1),
    rounded(speed && speed.low * 100, 1),
    rounded(speed && speed.high * 100, 1),
  ]
  const measured = hours.map((hour) => [
    hour.hasTyped ? 'typed' : 'measured',
    ...when(hour.hourStart),
    sensorName,
    temperature(hour.meanAirTempC),
    temperature(hour.minAirTempC),
    temperature(hour.maxAirTempC),
    rounded(hour.meanRelHumidityPct, 1),
    rounded(hour.maxRelHumidityPct, 1),
    ...figures(hourPoint(hour, pressurePa)),
    rounded(hour.dose.likely, 4),
    rounded(hour.coveredMinutes, 1),
    rounded(hour.gapMinutes, 1),
    hour.readingCount,
    hour.typedCount,
  ])
  const coming = forecast.map((point) => [
    'forecast',
    ...when(Math.floor(point.at / millisecondsInHour) * millisecondsInHour),
    sensorName,
    temperature(point.airTempC?.likely),
    temperature(point.airTempC?.low),
    temperature(point.airTempC?.high),
    rounded(point.relHumidityPct?.likely, 1),
    rounded(point.relHumidityPct?.high, 1),
    ...figures(point),
    null,
    null,
    null,
    0,
    0,
  ])
  return [...measured, ...coming]
}
