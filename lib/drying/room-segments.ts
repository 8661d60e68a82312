import { millisecondsInHour, millisecondsInMinute } from 'date-fns/constants'
import type { Instant, Rate, ReadingMark, ReadingSource, RoomReading, RoomSegment, SegmentKind } from '@/lib/drying/types'

/** Two readings further apart than this have a gap between them. Our own starting value. */
export const LONGEST_INTERVAL_MS = 60 * millisecondsInMinute

/** How long the newest reading is believed, by source. Our own starting values. */
const HOLD_MS: Record<ReadingSource, number> = { sensor: 30 * millisecondsInMinute, typed: 12 * millisecondsInHour }

/** The last moment for which a reading speaks when no other follows: 30 min after a sensor reading, 12 h after a typed one. */
export function holdsUntil({ measuredAt, source }: ReadingMark): Instant {
  return measuredAt + HOLD_MS[source]
}

/**
 * Turns readings of one room into stretches of drying rate.
 *
 * - From a sensor reading to the next one at most 60 min later the room factor runs on a straight line ('measured').
 * - Over a longer interval the lower of both ends is credited; half of it and the higher end are the bounds ('gap').
 * - A typed reading holds at its own rate until the next reading, 12 h at most ('typed'); after that nothing is credited.
 * - The newest sensor reading holds for 30 min ('held').
 *
 * Shape: any order of readings in, segments in order of time out. Readings after `now` do not count yet. Of two readings
 * at one instant the sensor's stands, then the slower one, so that the order of arrival never matters.
 * Units: reference hours per hour at a place factor of 1.
 *
 * @source our own rules; see SegmentKind.
 */
export function roomSegments(readings: readonly RoomReading[], { now }: { now: Instant }): RoomSegment[] {
  const ordered = onePerInstant(readings.filter((reading) => reading.measuredAt <= now))
  const segments: RoomSegment[] = []
  for (const [index, left] of ordered.entries()) {
    const segment = segmentAfter(left, ordered[index + 1], now)
    if (segment.to > segment.from) segments.push(segment)
  }
  return segments
}

function segmentAfter(left: RoomReading, right: RoomReading | undefined, now: Instant): RoomSegment {
  const from = left.measuredAt
  if (right === undefined || left.source === 'typed') {
    const to = Math.min(holdsUntil(left), right?.measuredAt ?? now)
    return constantSegment(from, to, left.source === 'typed' ? 'typed' : 'held', left.roomFactor)
  }
  const to = right.measuredAt
  if (to - from > LONGEST_INTERVAL_MS) {
    const lower = Math.min(left.roomFactor, right.roomFactor)
    const higher = Math.max(left.roomFactor, right.roomFactor)
    return { from, to, kind: 'gap', likely: steadyRate(lower), low: steadyRate(0.5 * lower), high: steadyRate(higher) }
  }
  const rate = { start: left.roomFactor, end: right.roomFactor }
  return { from, to, kind: right.source === 'typed' ? 'typed' : 'measured', likely: rate, low: rate, high: rate }
}

/** A segment of one rate without bounds. */
export function constantSegment(from: Instant, to: Instant, kind: SegmentKind, roomFactor: number): RoomSegment {
  const rate = steadyRate(roomFactor)
  return { from, to, kind, likely: rate, low: rate, high: rate }
}

/** A rate that stays the same; over one whole hour its number is also the dose. */
export function steadyRate(rate: number): Rate {
  return { start: rate, end: rate }
}

/** Readings in order of time, one for each instant: the sensor's before the typed one, then the slower one. */
export function onePerInstant(readings: readonly RoomReading[]): RoomReading[] {
  const ordered = readings.toSorted(
    (a, b) => a.measuredAt - b.measuredAt || a.source.localeCompare(b.source) || a.roomFactor - b.roomFactor,
  )
  return ordered.filter((reading, index) => reading.measuredAt !== ordered[index - 1]?.measuredAt)
}
