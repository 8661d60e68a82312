import { millisecondsInMinute, secondsInMinute } from 'date-fns/constants'
import { holdsUntil } from '@/lib/drying/room-segments'
import { formatDuration } from '@/lib/format/duration'
import { formatMoment } from '@/lib/format/local-time'
import { formatPercent } from '@/lib/format/units'
import type { SensorKind } from '@/lib/room/sensor-input'

/** At this and below the battery is to be changed. Common practice, no source. */
export const LOW_BATTERY_PCT = 15

export type SensorState = {
  kind: SensorKind
  /** The newest reading that counts; null before the first. */
  newestAt: number | null
  /** How many places in use it serves. */
  placeCount: number
  batteryPct: number | null
  clockOffsetSeconds: number | null
  /** Readings of the last 24 h that do not count. */
  markedCount: number
}

/**
 * What is to be looked at with a sensor, a sentence each, the worst first.
 *
 * @example sensorWarnings({ ...state, batteryPct: 12 }, { now, timeZone }) // => ['Battery 12 %: change it.']
 */
export function sensorWarnings(state: SensorState, { now, timeZone }: { now: number; timeZone: string }): string[] {
  const { kind, newestAt, placeCount, batteryPct, clockOffsetSeconds, markedCount } = state
  const warnings: string[] = []
  const source = kind === 'logger' ? 'sensor' : 'typed'
  if (placeCount > 0 && newestAt !== null && holdsUntil({ measuredAt: newestAt, source }) < now) {
    warnings.push(`Silent: no reading that counts since ${formatMoment(newestAt, now, timeZone)}. Trees in its air turn unknown.`)
  }
  if (isBatteryLow(batteryPct)) warnings.push(`Battery ${formatPercent(batteryPct)}: change it.`)
  if (clockOffsetSeconds !== null) warnings.push(`Its clock is ${clockWords(clockOffsetSeconds)}: set it by the network.`)
  if (markedCount > 0) warnings.push(`Marked readings in the last 24 h: ${markedCount}. They are kept, and count for nothing.`)
  return warnings
}

/** Whether the battery is to be changed; null is not known. */
export function isBatteryLow(batteryPct: number | null): boolean {
  return batteryPct !== null && batteryPct <= LOW_BATTERY_PCT
}

/**
 * How far a clock is off, to the minute.
 *
 * @example clockWords(420) // => '7 min fast'
 */
export function clockWords(offsetSeconds: number): string {
  return `${formatDuration(Math.round(Math.abs(offsetSeconds) / secondsInMinute) * millisecondsInMinute)} ${offsetSeconds > 0 ? 'fast' : 'slow'}`
}
