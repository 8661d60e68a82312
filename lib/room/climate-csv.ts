import { TZDate } from '@date-fns/tz'
import { millisecondsInDay } from 'date-fns/constants'
import { z } from 'zod'
import { hourStartOf } from '@/lib/drying/dose-hours'
import { localDay } from '@/lib/format/local-time'
import { fromSi, TEMP_UNITS, type TempUnit } from '@/lib/format/units'
import type { ClimateHour } from '@/lib/room/climate'
import { dayPoint, type ClimateSpan } from '@/lib/room/climate-days'
import { ROOM_RANGES } from '@/lib/room/range'
import { hourPoint, type RoomPoint } from '@/lib/room/series'

const MOST_DAYS = 31

const day = z.iso.date('A day is written as 2026-12-18.')

/** Query of a climate file: what the page draws over a range, or whole local days from one to another. */
export const climateRange = z
  .strictObject({
    from: day.optional(),
    to: day.optional(),
    range: z.enum(ROOM_RANGES).optional(),
    temp: z.enum(TEMP_UNITS).default('degC'),
  })
  .superRefine(({ from, to, range }, context) => {
    if (range !== undefined && (from !== undefined || to !== undefined)) {
      context.addIssue({ code: 'custom', path: ['range'], message: 'Give either a range or days.' })
    }
    if ((from === undefined) !== (to === undefined)) {
      context.addIssue({ code: 'custom', path: [from === undefined ? 'from' : 'to'], message: 'Give both days, or neither.' })
    }
    if (from === undefined || to === undefined) return
    const days = (Date.parse(to) - Date.parse(from)) / millisecondsInDay + 1
    if (days < 1) context.addIssue({ code: 'custom', path: ['to'], message: 'The last day lies before the first.' })
    if (days > MOST_DAYS) context.addIssue({ code: 'custom', path: ['to'], message: `At most ${MOST_DAYS} days at once.` })
  })
export type ClimateRange = z.output<typeof climateRange>

const rounded = (value: number | null | undefined, digits: number) =>
  value === null || value === undefined ? null : Math.round(value * 10 ** digits) / 10 ** digits

/** A row of the file: an hour of the table with its figures, or an hour of the forecast. */
export type ClimateFileRow = { hourStart: number; hour: ClimateHour | null; point: RoomPoint }

/** Measured hours in order, then the forecast. */
export function climateFileRows(hours: readonly ClimateHour[], forecast: readonly RoomPoint[], pressurePa: number): ClimateFileRow[] {
  return [
    ...hours.map((hour) => ({ hourStart: hour.hourStart, hour, point: hourPoint(hour, pressurePa) })),
    ...forecast.map((point) => ({ hourStart: hourStartOf(point.at), hour: null, point })),
  ]
}

export type ClimateColumn = { head: string; value: (row: ClimateFileRow) => string | number | null }

/**
 * Columns of the file, units in their heads. Instants are ISO 8601, in UTC and with the foundry's own offset.
 *
 * Speeds in percent of the reference speed in air of 1.0 m/s; the dose is that of the whole hour at a place factor of 1. Dew point,
 * deficit and gap are those of the hour's mean air. In a forecast the least and the most are its bounds.
 */
export function climateColumns({ sensorName, temp, timeZone }: { sensorName: string; temp: TempUnit; timeZone: string }): ClimateColumn[] {
  const temperature = (celsius: number | null | undefined) =>
    celsius === null || celsius === undefined ? null : rounded(fromSi(celsius, temp), 2)
  return [
    { head: 'kind', value: ({ hour }) => (hour === null ? 'forecast' : hour.hasTyped ? 'typed' : 'measured') },
    { head: 'hour_start_utc', value: ({ hourStart }) => new Date(hourStart).toISOString() },
    { head: 'hour_start_local', value: ({ hourStart }) => new TZDate(hourStart, timeZone).toISOString() },
    { head: 'sensor', value: () => sensorName },
    { head: `mean_air_temp_${temp}`, value: ({ point }) => temperature(point.airTempC?.likely) },
    { head: `min_air_temp_${temp}`, value: ({ hour, point }) => temperature(hour ? hour.minAirTempC : point.airTempC?.low) },
    { head: `max_air_temp_${temp}`, value: ({ hour, point }) => temperature(hour ? hour.maxAirTempC : point.airTempC?.high) },
    { head: 'mean_rel_humidity_pct', value: ({ point }) => rounded(point.relHumidityPct?.likely, 1) },
    { head: 'max_rel_humidity_pct', value: ({ hour, point }) => rounded(hour ? hour.maxRelHumidityPct : point.relHumidityPct?.high, 1) },
    { head: `dew_point_${temp}`, value: ({ point }) => temperature(point.dewPointC) },
    { head: 'vapour_pressure_deficit_pa', value: ({ point }) => rounded(point.vaporPressureDeficitPa, 0) },
    { head: 'wet_bulb_gap_k', value: ({ point }) => rounded(point.wetBulbGapK?.likely, 2) },
    { head: 'drying_speed_pct', value: ({ point }) => rounded(point.speed && point.speed.likely * 100, 1) },
    { head: 'drying_speed_low_pct', value: ({ point }) => rounded(point.speed && point.speed.low * 100, 1) },
    { head: 'drying_speed_high_pct', value: ({ point }) => rounded(point.speed && point.speed.high * 100, 1) },
    { head: 'dose_reference_hours', value: ({ hour }) => rounded(hour?.dose.likely, 4) },
    { head: 'covered_minutes', value: ({ hour }) => rounded(hour?.coveredMinutes, 1) },
    { head: 'gap_minutes', value: ({ hour }) => rounded(hour?.gapMinutes, 1) },
    { head: 'readings', value: ({ hour }) => hour?.readingCount ?? null },
    { head: 'typed_readings', value: ({ hour }) => hour?.typedCount ?? null },
  ]
}

/** A row of the file of a year: a local day. */
export type DayFileRow = { day: ClimateSpan; point: RoomPoint }

/** Days in order, each with its point. */
export const dayFileRows = (days: readonly ClimateSpan[], pressurePa: number): DayFileRow[] =>
  days.map((span) => ({ day: span, point: dayPoint(span, pressurePa) }))

export type DayColumn = { head: string; value: (row: DayFileRow) => string | number | null }

/**
 * Columns of the file of a year, one line a local day of 23, 24 or 25 hours. Means are weighed by the minutes for which readings speak;
 * dew point, deficit and gap are those of the day's mean air.
 */
export function dayColumns({ sensorName, temp, timeZone }: { sensorName: string; temp: TempUnit; timeZone: string }): DayColumn[] {
  const temperature = (celsius: number | null) => (celsius === null ? null : rounded(fromSi(celsius, temp), 2))
  return [
    { head: 'day', value: ({ day: { from } }) => localDay(from, timeZone) },
    { head: 'day_start_utc', value: ({ day: { from } }) => new Date(from).toISOString() },
    { head: 'sensor', value: () => sensorName },
    { head: `mean_air_temp_${temp}`, value: ({ day: { meanAirTempC } }) => temperature(meanAirTempC) },
    { head: `min_air_temp_${temp}`, value: ({ day: { minAirTempC } }) => temperature(minAirTempC) },
    { head: `max_air_temp_${temp}`, value: ({ day: { maxAirTempC } }) => temperature(maxAirTempC) },
    { head: 'mean_rel_humidity_pct', value: ({ day: { meanRelHumidityPct } }) => rounded(meanRelHumidityPct, 1) },
    { head: 'min_hourly_mean_rel_humidity_pct', value: ({ day: { minRelHumidityPct } }) => rounded(minRelHumidityPct, 1) },
    { head: 'max_rel_humidity_pct', value: ({ day: { maxRelHumidityPct } }) => rounded(maxRelHumidityPct, 1) },
    { head: `dew_point_${temp}`, value: ({ point }) => temperature(point.dewPointC) },
    { head: 'vapour_pressure_deficit_pa', value: ({ point }) => rounded(point.vaporPressureDeficitPa, 0) },
    { head: 'wet_bulb_gap_k', value: ({ point }) => rounded(point.wetBulbGapK?.likely, 2) },
    { head: 'drying_speed_pct', value: ({ point }) => rounded(point.speed && point.speed.likely * 100, 1) },
    { head: 'drying_speed_low_pct', value: ({ point }) => rounded(point.speed && point.speed.low * 100, 1) },
    { head: 'drying_speed_high_pct', value: ({ point }) => rounded(point.speed && point.speed.high * 100, 1) },
    { head: 'dose_reference_hours', value: ({ day: { dose } }) => rounded(dose.likely, 4) },
    { head: 'covered_minutes', value: ({ day: { coveredMinutes } }) => rounded(coveredMinutes, 1) },
    { head: 'gap_minutes', value: ({ day: { gapMinutes } }) => rounded(gapMinutes, 1) },
    { head: 'out_of_temp_band_minutes', value: ({ day: { outOfTempMinutes } }) => rounded(outOfTempMinutes, 1) },
    { head: 'out_of_humidity_band_minutes', value: ({ day: { outOfRhMinutes } }) => rounded(outOfRhMinutes, 1) },
    { head: 'readings', value: ({ day: { readingCount } }) => readingCount },
    { head: 'typed_readings', value: ({ day: { typedCount } }) => typedCount },
  ]
}
