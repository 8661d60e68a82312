import { millisecondsInHour, millisecondsInMinute } from 'date-fns/constants'
import { holdsUntil, onePerInstant } from '@/lib/drying/room-segments'
import type { Air, Instant, ReadingMark, RoomReading } from '@/lib/drying/types'

/** What is wrong, with the number that says so and the limit it crossed. The words of a message are written elsewhere. */
export type Flag =
  | { code: 'damp'; relHumidityPct: number; limitPct: number }
  | { code: 'damp in store'; relHumidityPct: number; limitPct: number; since: Instant }
  | { code: 'chill'; level: 'warn' | 'stop'; measure: 'depression' | 'speed'; value: number; limit: number }
  | { code: 'swing'; deviationK: number; limitK: number; since: Instant }
  | { code: 'heat'; measure: 'room' | 'above coat 1'; value: number; limit: number }
  | { code: 'stale'; source: ReadingMark['source']; minutes: number; limitMinutes: number }

/**
 * Limits that a foundry may set.
 *
 * @source our own starting values, to be calibrated, but for strictSwingK: the Investment Casting Institute's on-line atlas of
 *   defects holds the dip and drying areas within +-3 degF (1.7 K) against prime-coat lift.
 */
export const DEFAULT_FLAG_LIMITS = {
  dampPct: 75,
  dampInStoreHours: 12,
  chillWarnK: 8,
  chillStopK: 10,
  chillSpeed: 1.4,
  laterCoatChillK: 12,
  swingK: 2.5,
  strictSwingK: 1.7,
  swingMinutes: 10,
  heatC: 26,
  heatRiseK: 3,
}
export type FlagLimits = typeof DEFAULT_FLAG_LIMITS

/** Coats with the wax close below them: chill and swings lift them off it. */
const isNearWax = (coatNumber: number) => coatNumber <= 2

/**
 * Damp: above 75 % RH through the whole hour before the call, so the clock alone is no proof of dryness. With no reading in
 * that hour the last one counts, if it still holds.
 *
 * @returns the lowest humidity of the hour, or null.
 * @source our own starting value: silica gel binder holds water in damp air.
 */
export function dampFlag(readings: readonly RoomReading[], calledAt: Instant, limits: FlagLimits = DEFAULT_FLAG_LIMITS): Flag | null {
  const past = onePerInstant(readings.filter((reading) => reading.measuredAt <= calledAt))
  const inHour = past.filter((reading) => reading.measuredAt >= calledAt - millisecondsInHour)
  const holding = past.slice(-1).filter((reading) => holdsUntil(reading) >= calledAt)
  const humidities = (inHour.length > 0 ? inHour : holding).map((reading) => reading.relHumidityPct)
  const relHumidityPct = Math.min(...humidities)
  if (humidities.length === 0 || relHumidityPct <= limits.dampPct) return null
  return { code: 'damp', relHumidityPct, limitPct: limits.dampPct }
}

/**
 * Damp in store: above 75 % RH for 12 h on end at any time since `since`, the last call or the last confirmation by touch, weight
 * or temperature.
 *
 * @returns when it began and the lowest humidity of that time, or null.
 * @source common practice, no source.
 */
export function dampInStoreFlag(
  readings: readonly RoomReading[],
  since: Instant,
  now: Instant,
  limits: FlagLimits = DEFAULT_FLAG_LIMITS,
): Flag | null {
  const stored = readings.filter((reading) => reading.measuredAt >= since && reading.measuredAt <= now)
  const run = longestRun(stored, now, (reading) => reading.relHumidityPct > limits.dampPct)
  if (run === null || run.to - run.from < limits.dampInStoreHours * millisecondsInHour) return null
  const relHumidityPct = Math.min(...run.readings.map((reading) => reading.relHumidityPct))
  return { code: 'damp in store', relHumidityPct, limitPct: limits.dampPct, since: run.from }
}

export type ChillInput = { coatNumber: number; wetBulbDepressionK: number; roomFactor: number; placeFactor: number }

/**
 * Chill: a wet coat pulls the wax below it down to the wet bulb. Coats 1 and 2 warn above 8 K or a drying speed of 1.4 and
 * stop above 10 K; later coats warn above 12 K.
 *
 * @source our own starting values; that chill lifts the prime coat: Investment Casting Institute, on-line atlas of defects.
 */
export function chillFlag(input: ChillInput, limits: FlagLimits = DEFAULT_FLAG_LIMITS): Flag | null {
  const { coatNumber, wetBulbDepressionK: depressionK } = input
  const byDepression = (level: 'warn' | 'stop', limit: number): Flag | null =>
    depressionK > limit ? { code: 'chill', level, measure: 'depression', value: depressionK, limit } : null
  if (!isNearWax(coatNumber)) return byDepression('warn', limits.laterCoatChillK)
  const speed = input.placeFactor * input.roomFactor
  const bySpeed: Flag | null =
    speed > limits.chillSpeed ? { code: 'chill', level: 'warn', measure: 'speed', value: speed, limit: limits.chillSpeed } : null
  return byDepression('stop', limits.chillStopK) ?? byDepression('warn', limits.chillWarnK) ?? bySpeed
}

export type SwingInput = {
  coatNumber: number
  isWet: boolean
  dippedAt: Instant
  airTempAtDipC: number | null
  /** 2.5 K, or the strict 1.7 K. */
  limitK?: number
}

/**
 * Swing: while coat 1 or 2 is wet, the room has stayed more than 2.5 K from its temperature at the dip for 10 min.
 *
 * @returns the largest deviation of that time, with its sign, or null.
 * @source our own starting value; the strict level is the Investment Casting Institute's +-3 degF.
 */
export function swingFlag(
  { coatNumber, isWet, dippedAt, airTempAtDipC, limitK = DEFAULT_FLAG_LIMITS.swingK }: SwingInput,
  readings: readonly RoomReading[],
  now: Instant,
  limits: FlagLimits = DEFAULT_FLAG_LIMITS,
): Flag | null {
  if (!isNearWax(coatNumber) || !isWet || airTempAtDipC === null) return null
  const deviationOf = (reading: Air) => reading.airTempC - airTempAtDipC
  const sinceDip = readings.filter((reading) => reading.measuredAt >= dippedAt && reading.measuredAt <= now)
  const run = longestRun(sinceDip, now, (reading) => Math.abs(deviationOf(reading)) > limitK)
  if (run === null || run.to - run.from < limits.swingMinutes * millisecondsInMinute) return null
  const deviations = run.readings.map(deviationOf)
  const deviationK = deviations.reduce((largest, deviation) => (Math.abs(deviation) > Math.abs(largest) ? deviation : largest), 0)
  return { code: 'swing', deviationK, limitK, since: run.from }
}

/**
 * Heat: wax grows and cracks the shell around it. A room above 26 degC, or more than 3 K above its temperature at coat 1, while
 * there is wax in the shell.
 *
 * @source our own starting values.
 */
export function heatFlag(
  { airTempC, airTempAtCoat1C, hasWax }: { airTempC: number; airTempAtCoat1C: number | null; hasWax: boolean },
  limits: FlagLimits = DEFAULT_FLAG_LIMITS,
): Flag | null {
  if (!hasWax) return null
  if (airTempC > limits.heatC) return { code: 'heat', measure: 'room', value: airTempC, limit: limits.heatC }
  const riseK = airTempAtCoat1C === null ? 0 : airTempC - airTempAtCoat1C
  return riseK > limits.heatRiseK ? { code: 'heat', measure: 'above coat 1', value: riseK, limit: limits.heatRiseK } : null
}

/** Stale: the newest reading no longer speaks for the room: older than 30 min, or 12 h when typed. Null also when there is none. */
export function staleFlag(newest: ReadingMark | null, now: Instant): Flag | null {
  if (newest === null || holdsUntil(newest) >= now) return null
  const minutesSince = (at: Instant) => (at - newest.measuredAt) / millisecondsInMinute
  return { code: 'stale', source: newest.source, minutes: minutesSince(now), limitMinutes: minutesSince(holdsUntil(newest)) }
}

/** Hung too long: a wet coat's hours since its dip exceed its longest wait. Dry and within it is waiting, not overdue. */
export function isOverdue(hoursSinceDip: number, longestWaitHours: number): boolean {
  return hoursSinceDip > longestWaitHours
}

type Run = { from: Instant; to: Instant; readings: RoomReading[] }

/**
 * Longest time through which every reading holds true, missing readings between them not counting against it. It ends with its
 * last true reading; the newest reading of all is believed while it holds.
 */
function longestRun(readings: readonly RoomReading[], now: Instant, isTrue: (reading: RoomReading) => boolean): Run | null {
  const ordered = onePerInstant(readings)
  let longest: Run | null = null
  let start = 0
  for (const [index, reading] of ordered.entries()) {
    if (!isTrue(reading)) {
      start = index + 1
      continue
    }
    const from = ordered[start]!.measuredAt
    const to = index === ordered.length - 1 ? Math.min(now, holdsUntil(reading)) : reading.measuredAt
    if (longest === null || to - from > longest.to - longest.from) longest = { from, to, readings: ordered.slice(start, index + 1) }
  }
  return longest
}
