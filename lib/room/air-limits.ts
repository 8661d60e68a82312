// Apart from the contract: the wall tablet checks what is typed by these, and needs no library for it.

/** The coldest and the hottest that a shell room can be, °C. */
export const AIR_TEMP_LIMITS_C = { least: -10, most: 60 } as const

/** Sensors report a little over 100 % in saturated air, so 105 is the limit; the clock itself clamps to 0.5-100. */
export const REL_HUMIDITY_LIMITS_PCT = { least: 0, most: 105 } as const

export const HUMIDITY_WORDS = {
  notANumber: 'Humidity is a number in %.',
  tooLow: 'Humidity cannot be under 0 %.',
  tooHigh: 'Humidity cannot be over 105 %.',
} as const

/**
 * What is wrong with a relative humidity in %, as a sentence; null when nothing is.
 *
 * @example humidityProblem(52) // => null
 * @example humidityProblem(120) // => 'Humidity cannot be over 105 %.'
 */
export function humidityProblem(percent: number | null): string | null {
  if (percent === null || !Number.isFinite(percent)) return HUMIDITY_WORDS.notANumber
  if (percent < REL_HUMIDITY_LIMITS_PCT.least) return HUMIDITY_WORDS.tooLow
  return percent > REL_HUMIDITY_LIMITS_PCT.most ? HUMIDITY_WORDS.tooHigh : null
}
