import { formatMinute } from '@/lib/schedule/clock-text'

/** Weekday 1 is Monday. */
export const WEEKDAYS = [1, 2, 3, 4, 5, 6, 7] as const
const WORDS = ['Monday', 'Tuesday', 'Wednesday', 'Thursday', 'Friday', 'Saturday', 'Sunday'] as const

/** Name of a local weekday, 1 is Monday. */
export const weekdayWord = (weekday: number): string => WORDS[weekday - 1] ?? ''

const short = (weekday: number) => weekdayWord(weekday).slice(0, 3)

/** A stretch of one weekday, minutes after local midnight. */
export type WeekSpan = { weekday: number; fromMinute: number; toMinute: number }

/**
 * A timetable of a week in words, days that are alike drawn together; `none` where there is not one stretch.
 *
 * @example weekWords([1, 2, 3].map((weekday) => ({ weekday, fromMinute: 360, toMinute: 1080 })), 'never') // => 'Mon to Wed 06:00–18:00'
 */
export function weekWords(spans: readonly WeekSpan[], none: string): string {
  const hoursOf = (weekday: number) =>
    spans
      .filter((span) => span.weekday === weekday)
      .toSorted((one, other) => one.fromMinute - other.fromMinute)
      .map((span) => `${formatMinute(span.fromMinute)}–${formatMinute(span.toMinute)}`)
      .join(', ')
  const runs: { first: number; last: number; hours: string }[] = []
  for (const weekday of WEEKDAYS) {
    const hours = hoursOf(weekday)
    const run = runs.at(-1)
    if (run?.hours === hours) run.last = weekday
    else runs.push({ first: weekday, last: weekday, hours })
  }
  const words = runs
    .filter((run) => run.hours !== '')
    .map(({ first, last, hours }) => `${first === last ? short(first) : `${short(first)} to ${short(last)}`} ${hours}`)
  return words.length === 0 ? none : words.join('; ')
}
