import { chillFlag, DEFAULT_FLAG_LIMITS, heatFlag, type Flag } from '@/lib/drying/flags'
import { wetBulbDepressionK } from '@/lib/drying/room-factor'

/** An hour of a room's air, as it is forecast or as somebody would have it. */
export type AirHour = { from: number; to: number; airTempC: number; relHumidityPct: number; roomFactor: number }

/** A shell with wax in it, as far as the limits of its air ask. */
export type LimitedCoat = {
  coatNumber: number
  placeFactor: number
  /** Of the room when its first coat was dipped: what the wax has grown from since. */
  airTempAtCoat1C: number | null
  /** Of the room when the newest coat was dipped. */
  airTempAtDipC: number | null
  /** Until when the newest coat is wet: chill and swings harm no dry one. */
  wetUntil: number
}

/**
 * Limits that an hour of an air breaks for each shell: chill and swing while its newest coat is wet, heat while there is wax in it.
 *
 * Shape: one list of flags a shell, in the order of the shells.
 */
export function limitsBroken(hour: AirHour, coats: readonly LimitedCoat[], pressurePa: number): Flag[][] {
  const depressionK = wetBulbDepressionK(hour, pressurePa)
  return coats.map((coat) => {
    const heat = heatFlag({ airTempC: hour.airTempC, airTempAtCoat1C: coat.airTempAtCoat1C, hasWax: true })
    const ofWet =
      coat.wetUntil > hour.from
        ? [chillFlag({ ...coat, wetBulbDepressionK: depressionK, roomFactor: hour.roomFactor }), swingOf(hour, coat)]
        : []
    return [heat, ...ofWet].filter((flag) => flag !== null)
  })
}

/** Whether any hour of an air breaks any limit: such an air is never proposed. */
export function breaksLimits(hours: readonly AirHour[], coats: readonly LimitedCoat[], pressurePa: number): boolean {
  return hours.some((hour) => limitsBroken(hour, coats, pressurePa).some((flags) => flags.length > 0))
}

/** An hour's air is one reading of a whole hour: longer than a swing may last. */
function swingOf({ from, airTempC }: AirHour, { coatNumber, airTempAtDipC }: LimitedCoat): Flag | null {
  const { swingK } = DEFAULT_FLAG_LIMITS
  if (!isNearWax(coatNumber) || airTempAtDipC === null) return null
  const deviationK = airTempC - airTempAtDipC
  return Math.abs(deviationK) > swingK ? { code: 'swing', deviationK, limitK: swingK, since: from } : null
}

/** Coats that lie close to the wax, which chill and swings lift off it. */
export const isNearWax = (coatNumber: number): boolean => coatNumber <= 2

/** The highest temperature of a room that cracks no shell in it, °C. */
export function highestTempC(coats: readonly Pick<LimitedCoat, 'airTempAtCoat1C'>[]): number {
  const { heatC, heatRiseK } = DEFAULT_FLAG_LIMITS
  return coats.reduce((highest, { airTempAtCoat1C }) => Math.min(highest, (airTempAtCoat1C ?? Infinity) + heatRiseK), heatC)
}

/** Temperatures of a room that no wet coat close to the wax swings at, and no shell cracks at; null where none does, or nothing dips there. */
export function steadyTempsC(coats: readonly LimitedCoat[]): { lowC: number; highC: number } | null {
  const { swingK } = DEFAULT_FLAG_LIMITS
  const atDip = coats.flatMap((coat) =>
    isNearWax(coat.coatNumber) && coat.wetUntil > -Infinity && coat.airTempAtDipC !== null ? [coat.airTempAtDipC] : [],
  )
  if (atDip.length === 0) return null
  const lowC = Math.max(...atDip) - swingK
  const highC = Math.min(Math.min(...atDip) + swingK, highestTempC(coats))
  return lowC <= highC ? { lowC, highC } : null
}
