import { millisecondsInHour, millisecondsInMinute, millisecondsInSecond } from 'date-fns/constants'
import type { Air, ReadingSource } from '@/lib/drying/types'
import { AIR_TEMP_LIMITS_C, REL_HUMIDITY_LIMITS_PCT } from '@/lib/room/air-limits'

/** Why a reading is kept and not counted. */
export type SetAsideReason = 'out of range' | 'jump' | 'flat'

/** What a person reads of it, as a sentence. */
export const REASON_SENTENCES: Record<SetAsideReason, string> = {
  'out of range': 'No shell room is like this: −10 to 60 °C, 0 to 105 % RH.',
  jump: 'More than 10 K or 40 % RH away from the readings just before and just after it.',
  flat: 'Nothing has moved for more than 6 hours: the sensor may be stuck.',
}

/** More than this within five minutes is no air of a room. Our own starting values. */
const JUMP_K = 10
const JUMP_RH_PCT = 40
/** Five minutes, and half a one for a logger whose five minutes are not exact. */
export const JUMP_WITHIN_MS = 5 * millisecondsInMinute + 30 * millisecondsInSecond

/** A sensor whose last digit has not moved for longer is taken to be stuck. Our own starting value. */
const FLAT_AFTER_MS = 6 * millisecondsInHour
/** Through a longer silence nobody can say that nothing moved. */
const FLAT_GAP_MS = 60 * millisecondsInMinute
/** No reading further back can tell whether one is flat. */
export const FLAT_REACH_MS = FLAT_AFTER_MS + FLAT_GAP_MS

export type MarkableReading = Air & { measuredAt: number; source: ReadingSource }

/** Whether this can be the air of a shell room at all. */
export function isWithinRange({ airTempC, relHumidityPct }: Air): boolean {
  return (
    airTempC >= AIR_TEMP_LIMITS_C.least &&
    airTempC <= AIR_TEMP_LIMITS_C.most &&
    relHumidityPct >= REL_HUMIDITY_LIMITS_PCT.least &&
    relHumidityPct <= REL_HUMIDITY_LIMITS_PCT.most
  )
}

/**
 * Which readings of one sensor do not count, by the readings around them alone, so that the order of arrival never matters.
 *
 * - 'jump': more than 10 K or 40 % RH away from both its neighbours, each within five minutes. A step that stays is believed.
 * - 'flat': it and every sensor reading of the six hours before it say the same in both values, with no silence over an hour.
 *   A typed reading is never flat: a person looked.
 *
 * Shape: readings within range, as the device said them, in order of time, one for each instant; a mark for each. The marks of the first
 * `JUMP_WITHIN_MS + FLAT_REACH_MS` and of the last `JUMP_WITHIN_MS` of a cut-out may be wanting.
 *
 * @source our own rules.
 */
export function readingMarks(readings: readonly MarkableReading[]): ('jump' | 'flat' | null)[] {
  let last: MarkableReading | null = null
  let sameSince = 0
  return readings.map((reading, index) => {
    if (reading.source === 'sensor') {
      const goesOn = last !== null && isSameAir(last, reading) && reading.measuredAt - last.measuredAt <= FLAT_GAP_MS
      if (!goesOn) sameSince = reading.measuredAt
      last = reading
    }
    if (isJump(reading, readings[index - 1]) && isJump(reading, readings[index + 1])) return 'jump'
    return reading.source === 'sensor' && reading.measuredAt - sameSince > FLAT_AFTER_MS ? 'flat' : null
  })
}

const isSameAir = (one: Air, other: Air) => one.airTempC === other.airTempC && one.relHumidityPct === other.relHumidityPct

function isJump(reading: MarkableReading, neighbour: MarkableReading | undefined): boolean {
  if (neighbour === undefined || Math.abs(reading.measuredAt - neighbour.measuredAt) > JUMP_WITHIN_MS) return false
  return (
    Math.abs(reading.airTempC - neighbour.airTempC) > JUMP_K || Math.abs(reading.relHumidityPct - neighbour.relHumidityPct) > JUMP_RH_PCT
  )
}

type Claim = Air & { source: ReadingSource; pressurePa: number | null }

/**
 * Of two readings of one instant, whether the second stands rather than the first: a sensor's before a typed one, then the damper,
 * then the cooler, then the one of the lower pressure. So that which came first never matters.
 */
export function standsBefore(known: Claim, claim: Claim): boolean {
  if (known.source !== claim.source) return claim.source === 'sensor'
  if (known.relHumidityPct !== claim.relHumidityPct) return claim.relHumidityPct > known.relHumidityPct
  if (known.airTempC !== claim.airTempC) return claim.airTempC < known.airTempC
  return (claim.pressurePa ?? Infinity) < (known.pressurePa ?? Infinity)
}
