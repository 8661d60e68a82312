import { tzOffset } from '@date-fns/tz'
import { millisecondsInDay, millisecondsInHour, millisecondsInMinute } from 'date-fns/constants'
import { hourStartOf, meanRoomFactor } from '@/lib/drying/dose-hours'
import { constantSegment } from '@/lib/drying/room-segments'
import type { DoseHour, Instant, RoomSegment } from '@/lib/drying/types'

/** How far back the forecast looks, and how many days an hour of the day needs. Our own starting values. */
const HISTORY_DAYS = 14
const FEWEST_DAYS = 3

type ForecastSpan = {
  now: Instant
  /** IANA zone of the foundry: rooms follow the working day, not UTC. */
  timeZone: string
  horizonHours: number
}

export type ForecastInput = ForecastSpan & {
  /** Hourly rows of the room, of the last 14 days; older and unfinished ones are passed over. */
  hours: readonly DoseHour[]
  /** Room factor of the newest reading; null when there has never been one. */
  lastRoomFactor: number | null
}

/**
 * What the room will probably do: for each coming hour the median room factor of that local hour of the day over 14 days.
 * An hour of the day with under 3 days of data takes the median of the last 24 h, else the newest reading's factor.
 *
 * Shape: segments of one rate from `now`, one per UTC hour; none where nothing is known.
 *
 * @source our own rule, to be calibrated.
 */
export function forecastSegments({ hours, lastRoomFactor, ...span }: ForecastInput): RoomSegment[] {
  return forecastHours(meanRoomFactor, { hours, last: lastRoomFactor, ...span }).map(({ from, to, likely }) =>
    constantSegment(from, to, 'forecast', likely),
  )
}

/** A coming hour of one figure of the room: its median, and the tenth and ninetieth of a hundred of the days behind it. */
export type ForecastHour = { from: Instant; to: Instant; likely: number; low: number; high: number }

/**
 * The same rule for any figure of an hour, such as its mean temperature, with how far it has lain off on the days behind it.
 *
 * @param valueOf the figure of an hour; null where the hour does not tell it.
 * @param last what is taken where no hour tells; null gives no forecast.
 * @source our own rule, to be calibrated.
 */
export function forecastHours<Row extends { hourStart: Instant }>(
  valueOf: (row: Row) => number | null,
  { hours, now, timeZone, last, horizonHours }: ForecastSpan & { hours: readonly Row[]; last: number | null },
): ForecastHour[] {
  const localHour = localHourIn(timeZone)
  const byLocalHour = new Map<number, number[]>()
  const lastDay: number[] = []
  for (const row of hours) {
    const isRecent = row.hourStart >= now - HISTORY_DAYS * millisecondsInDay && row.hourStart + millisecondsInHour <= now
    const value = isRecent ? valueOf(row) : null
    if (value === null) continue
    const hour = localHour(row.hourStart)
    const known = byLocalHour.get(hour)
    if (known) known.push(value)
    else byLocalHour.set(hour, [value])
    if (row.hourStart >= now - millisecondsInDay) lastDay.push(value)
  }
  const fallback = lastDay.length > 0 ? spreadOf(lastDay) : last === null ? null : { likely: last, low: last, high: last }
  const spreads = new Map([...byLocalHour].map(([hour, known]) => [hour, known.length >= FEWEST_DAYS ? spreadOf(known) : fallback]))
  const coming: ForecastHour[] = []
  const end = now + horizonHours * millisecondsInHour
  for (let hour = hourStartOf(now); hour < end; hour += millisecondsInHour) {
    const spread = spreads.get(localHour(hour)) ?? fallback
    const from = Math.max(now, hour)
    const to = Math.min(end, hour + millisecondsInHour)
    if (spread !== null && to > from) coming.push({ from, to, ...spread })
  }
  return coming
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

function spreadOf(values: readonly number[]): { likely: number; low: number; high: number } {
  const ordered = values.toSorted((a, b) => a - b)
  return { likely: quantile(ordered, 0.5), low: quantile(ordered, 0.1), high: quantile(ordered, 0.9) }
}

/** On a straight line between the two nearest of some ordered values. */
function quantile(ordered: readonly number[], share: number): number {
  const position = share * (ordered.length - 1)
  const below = ordered[Math.floor(position)]!
  return below + (ordered[Math.ceil(position)]! - below) * (position - Math.floor(position))
}
