import { tzOffset } from '@date-fns/tz'
import { millisecondsInDay, millisecondsInHour, millisecondsInMinute } from 'date-fns/constants'
import { hourStartOf, meanRoomFactor } from '@/lib/drying/dose-hours'
import { constantSegment } from '@/lib/drying/room-segments'
import type { DoseHour, Instant, RoomSegment } from '@/lib/drying/types'

/** How far back the forecast looks, and how many days an hour of the day needs. Our own starting values. */
const HISTORY_DAYS = 14
const FEWEST_DAYS = 3

export type ForecastInput = {
  /** Hourly rows of the room, of the last 14 days; older and unfinished ones are passed over. */
  hours: readonly DoseHour[]
  now: Instant
  /** IANA zone of the foundry: rooms follow the working day, not UTC. */
  timeZone: string
  /** Room factor of the newest reading; null when there has never been one. */
  lastRoomFactor: number | null
  horizonHours: number
}

/**
 * What the room will probably do: for each coming hour the median room factor of that local hour of the day over 14 days.
 * An hour of the day with under 3 days of data takes the median of the last 24 h, else the newest reading's factor.
 *
 * Shape: segments of one rate from `now`, one per UTC hour; none where nothing is known.
 *
 * @source our own rule, to be calibrated.
 */
export function forecastSegments({ hours, now, timeZone, lastRoomFactor, horizonHours }: ForecastInput): RoomSegment[] {
  const localHour = localHourIn(timeZone)
  const byLocalHour = new Map<number, number[]>()
  const lastDay: number[] = []
  for (const row of hours) {
    const factor = meanRoomFactor(row)
    const isRecent = row.hourStart >= now - HISTORY_DAYS * millisecondsInDay && row.hourStart + millisecondsInHour <= now
    if (factor === null || !isRecent) continue
    const hour = localHour(row.hourStart)
    byLocalHour.set(hour, [...(byLocalHour.get(hour) ?? []), factor])
    if (row.hourStart >= now - millisecondsInDay) lastDay.push(factor)
  }
  const fallback = lastDay.length > 0 ? median(lastDay) : lastRoomFactor
  const medians = new Map([...byLocalHour].map(([hour, known]) => [hour, known.length >= FEWEST_DAYS ? median(known) : fallback]))
  const segments: RoomSegment[] = []
  const end = now + horizonHours * millisecondsInHour
  for (let hour = hourStartOf(now); hour < end; hour += millisecondsInHour) {
    const factor = medians.get(localHour(hour)) ?? fallback
    const from = Math.max(now, hour)
    const to = Math.min(end, hour + millisecondsInHour)
    if (factor !== null && to > from) segments.push(constantSegment(from, to, 'forecast', factor))
  }
  return segments
}

/** Tells an instant's local hour of the day. Asks for the zone's offset twice a UTC day, and at every instant of a day on which it changes. */
function localHourIn(timeZone: string): (at: Instant) => number {
  const offsetMs = (at: Instant) => tzOffset(timeZone, new Date(at)) * millisecondsInMinute
  const steady = new Map<number, number | null>()
  return (at) => {
    const day = Math.floor(at / millisecondsInDay)
    let offset = steady.get(day)
    if (offset === undefined) {
      const atStart = offsetMs(day * millisecondsInDay)
      offset = offsetMs((day + 1) * millisecondsInDay) === atStart ? atStart : null
      steady.set(day, offset)
    }
    return Math.floor((at + (offset ?? offsetMs(at))) / millisecondsInHour) % 24
  }
}

function median(values: readonly number[]): number {
  const ordered = values.toSorted((a, b) => a - b)
  const middle = ordered.length / 2
  return (ordered[Math.ceil(middle) - 1]! + ordered[Math.floor(middle)]!) / 2
}
