import { TZDate } from '@date-fns/tz'
import { millisecondsInDay, millisecondsInHour } from 'date-fns/constants'
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
  const localHour = (at: Instant) => new TZDate(at, timeZone).getHours()
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
  const segments: RoomSegment[] = []
  const end = now + horizonHours * millisecondsInHour
  for (let hour = hourStartOf(now); hour < end; hour += millisecondsInHour) {
    const known = byLocalHour.get(localHour(hour)) ?? []
    const factor = known.length >= FEWEST_DAYS ? median(known) : fallback
    const from = Math.max(now, hour)
    const to = Math.min(end, hour + millisecondsInHour)
    if (factor !== null && to > from) segments.push(constantSegment(from, to, 'forecast', factor))
  }
  return segments
}

function median(values: readonly number[]): number {
  const ordered = values.toSorted((a, b) => a - b)
  const middle = ordered.length / 2
  return (ordered[Math.ceil(middle) - 1]! + ordered[Math.floor(middle)]!) / 2
}
