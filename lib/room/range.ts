import { TZDate } from '@date-fns/tz'
import { millisecondsInHour } from 'date-fns/constants'
import { formatDate, localDay } from '@/lib/format/local-time'
import { AHEAD_HOURS, BACK_HOURS } from '@/lib/room/series'

/** How much of a room's air is drawn: a day back and a day ahead, a fortnight of hours, or a year of days. */
export const ROOM_RANGES = ['48h', '14d', '1y'] as const
export type RoomRange = (typeof ROOM_RANGES)[number]

const FORTNIGHT_HOURS = 14 * 24
/** Today and the year before it. */
const YEAR_DAYS = 366

/** A range from an address; anything else is the two days. */
export const rangeOf = (word: unknown): RoomRange => ROOM_RANGES.find((range) => range === word) ?? '48h'

/** From when to when a range is drawn: a year begins on a local midnight. */
export function rangeEnds(range: RoomRange, now: number, timeZone: string): { from: number; to: number } {
  switch (range) {
    case '48h':
      return { from: now - BACK_HOURS * millisecondsInHour, to: now + AHEAD_HOURS * millisecondsInHour }
    case '14d':
      return { from: now - FORTNIGHT_HOURS * millisecondsInHour, to: now }
    case '1y':
      return { from: lastDays(now, timeZone, YEAR_DAYS)[0]!.from, to: now }
  }
}

export type LocalDay = { from: number; to: number }

/** The last local days, today among them, in order: 23 or 25 hours where the clocks change; today ends now. */
export function lastDays(now: number, timeZone: string, count: number): LocalDay[] {
  const local = new TZDate(now, timeZone)
  const midnight = (back: number) =>
    new TZDate(local.getFullYear(), local.getMonth(), local.getDate() - back, 0, 0, 0, 0, timeZone).getTime()
  return Array.from({ length: count }, (_, index) => ({
    from: midnight(count - 1 - index),
    to: index === count - 1 ? now : midnight(count - 2 - index),
  })).filter((day) => day.to > day.from)
}

/** The local days that a year draws, today among them. */
export const yearOfDays = (now: number, timeZone: string): LocalDay[] => lastDays(now, timeZone, YEAR_DAYS)

/** Local midnight at the beginning of today, and of this week. */
export function todayAndMonday(now: number, timeZone: string): { today: number; monday: number } {
  const back = (new TZDate(now, timeZone).getDay() + 6) % 7
  const days = lastDays(now, timeZone, back + 1)
  return { today: days.at(-1)?.from ?? now, monday: days[0]?.from ?? now }
}

/** A mark at the foot of a chart: an instant, its words, and whether it stays where there is little room. */
export type RangeTick = { at: number; words: string; isMajor: boolean }

/** Local midnights of a fortnight, 'Mon 12', or months of a year, 'Oct' with the year at its beginning. */
export function rangeTicks(range: '14d' | '1y', { from, to }: { from: number; to: number }, timeZone: string): RangeTick[] {
  const local = new TZDate(from, timeZone)
  const [year, month, date] = [local.getFullYear(), local.getMonth(), local.getDate()]
  const starts = Array.from({ length: 16 }, (_, index) =>
    range === '14d'
      ? new TZDate(year, month, date + index, 0, 0, 0, 0, timeZone).getTime()
      : new TZDate(year, month + index, 1, 0, 0, 0, 0, timeZone).getTime(),
  )
  return starts
    .filter((at) => at >= from && at <= to)
    .map((at, index) => {
      const [weekday, day, name] = formatDate(at, timeZone).split(' ')
      const isNewYear = name === 'Jan'
      const words = range === '14d' ? `${weekday} ${day}` : isNewYear ? `Jan ${localDay(at, timeZone).slice(0, 4)}` : (name ?? '')
      return { at, words, isMajor: index % (range === '14d' ? 4 : 3) === 0 }
    })
}

/** A range as it is named. */
export const RANGE_NAMES: Record<RoomRange, string> = { '48h': '48 hours', '14d': '14 days', '1y': 'one year' }
/** And what was measured in it. */
export const RANGE_SPANS: Record<RoomRange, string> = { '48h': 'in the last day', '14d': 'in 14 days', '1y': 'in a year' }
