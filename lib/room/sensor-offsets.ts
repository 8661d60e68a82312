import type { Air } from '@/lib/drying/types'
import type { TempUnit } from '@/lib/format/units'
import { AIR_TEMP_LIMITS_C } from '@/lib/room/air-limits'

/** What is added to the readings of a sensor from an instant on, until the next one. */
export type SensorOffset = { since: number; airTempOffsetK: number; relHumidityOffsetPct: number }

/** What the clock takes: below or above no sensor means what it says. Common practice, no source. */
const COUNTED_RH_PCT = { least: 0.5, most: 100 }

/** Sums of decimals, without their tail: 21.4 - 0.4 is 21. */
const tidy = (value: number) => Math.round(value * 1e6) / 1e6
const clamp = (value: number, { least, most }: { least: number; most: number }) => Math.min(most, Math.max(least, value))

/** The offset that counts at an instant; null where none does. `offsets` in any order. */
export function offsetAt<Offset extends SensorOffset>(offsets: readonly Offset[], at: number): Offset | null {
  return offsets.filter(({ since }) => since <= at).toSorted((one, other) => other.since - one.since)[0] ?? null
}

/**
 * The air that counts for what a device said at an instant.
 *
 * @example correctedAir({ airTempC: 21.4, relHumidityPct: 52 }, { since: 0, airTempOffsetK: -0.4, relHumidityOffsetPct: 3 }) // => { airTempC: 21, relHumidityPct: 55 }
 */
export function correctedAir({ airTempC, relHumidityPct }: Air, offset: SensorOffset | null): Air {
  const { airTempOffsetK = 0, relHumidityOffsetPct = 0 } = offset ?? {}
  return {
    airTempC: airTempOffsetK === 0 ? airTempC : clamp(tidy(airTempC + airTempOffsetK), AIR_TEMP_LIMITS_C),
    relHumidityPct: relHumidityOffsetPct === 0 ? relHumidityPct : clamp(tidy(relHumidityPct + relHumidityOffsetPct), COUNTED_RH_PCT),
  }
}

/**
 * What an offset adds, in the unit of whoever reads it: as exact as it was typed.
 *
 * @example offsetWords({ airTempOffsetK: -0.4, relHumidityOffsetPct: 3 }) // => '−0.4 K, +3 points RH'
 */
export function offsetWords(
  { airTempOffsetK, relHumidityOffsetPct }: Pick<SensorOffset, 'airTempOffsetK' | 'relHumidityOffsetPct'>,
  unit: TempUnit = 'degC',
): string {
  const parts = [
    ...(airTempOffsetK === 0 ? [] : [unit === 'degF' ? `${signed(airTempOffsetK * 1.8)}\u00A0°F` : `${signed(airTempOffsetK)}\u00A0K`]),
    ...(relHumidityOffsetPct === 0 ? [] : [`${signed(relHumidityOffsetPct)}\u00A0points RH`]),
  ]
  return parts.length === 0 ? 'nothing' : parts.join(', ')
}

const signed = (value: number) => `${value < 0 ? '−' : '+'}${Number(Math.abs(value).toFixed(2))}`
