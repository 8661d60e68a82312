import type { PlaceAir } from '@/lib/drying/types'
import { formatDay } from '@/lib/format/local-time'
import { wholeNumber } from '@/lib/format/units'

/** What the air speed at the trees is measured with. */
export const AIR_METERS = ['hot-wire meter', 'vane meter'] as const
export type AirMeter = (typeof AIR_METERS)[number]

/** Where the figures of a place's air come from: a measurement on a local day, or an estimate (all null). */
export type AirMeasured = { airMeasuredOn: string | null; airMeasuredWith: AirMeter | null; airMeasuredBy: string | null }

/** Whether the air of a place differs with its fans on and off, so that it matters how they stand. */
export const hasFans = (air: PlaceAir): boolean => air.airSpeedFansOnMps !== air.airSpeedFansOffMps && air.fanDuty > 0

/**
 * The air speed at the trees in words, with the fans as they stand.
 *
 * @example speedWords({ airSpeedFansOnMps: 1.5, airSpeedFansOffMps: 0.1, fanDuty: 0.3, fanHours: [] }, true)
 * // => '1.5 m/s for 30 % of the time, else 0.1 m/s'
 */
export function speedWords(air: PlaceAir, isOn: boolean): string {
  const off = `${air.airSpeedFansOffMps} m/s`
  if (!isOn || !hasFans(air)) return off
  const on = `${air.airSpeedFansOnMps} m/s`
  return air.fanDuty === 1 ? on : `${on} for ${wholeNumber(air.fanDuty * 100)} % of the time, else ${off}`
}

/** Fans get dusty and racks are moved: after a year the figure says little. */
const isOld = (measuredOn: string, today: string): boolean => `${Number(measuredOn.slice(0, 4)) + 1}${measuredOn.slice(4)}` < today

/** How well the air speeds of a place are known, and whether that asks for a walk with the meter. Days are local ones. */
export function measuredWords(
  { airMeasuredOn, airMeasuredWith, airMeasuredBy }: AirMeasured,
  today: string,
): { text: string; isDue: boolean } {
  if (airMeasuredOn === null) return { text: 'estimated, not measured', isDue: true }
  const year = airMeasuredOn.slice(0, 4) === today.slice(0, 4) ? '' : ` ${airMeasuredOn.slice(0, 4)}`
  const how = [airMeasuredWith && `with a ${airMeasuredWith}`, airMeasuredBy && `by ${airMeasuredBy}`].filter(Boolean).join(' ')
  const text = `measured ${formatDay(airMeasuredOn).slice(4)}${year}${how && `, ${how}`}`
  return isOld(airMeasuredOn, today) ? { text: `${text}: over a year ago, measure again`, isDue: true } : { text, isDue: false }
}
