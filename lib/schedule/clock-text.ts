import { z } from 'zod'

/** Minutes in a day, the end of the last one. */
const DAY_MINUTES = 1440

/**
 * Wall-clock time as people type it, in minutes after midnight; null for anything else.
 *
 * @example readClock('7') // => 420
 * @example readClock('16:30') // => 990
 * @example readClock('24:00') // => 1440
 */
export function readClock(text: string): number | null {
  const [, hours, minutes = '0'] = /^(\d{1,2})(?:[:.h]?(\d{2}))?$/.exec(text.trim()) ?? []
  if (hours === undefined || Number(minutes) > 59) return null
  const minute = Number(hours) * 60 + Number(minutes)
  return minute <= DAY_MINUTES ? minute : null
}

/**
 * Minutes after midnight as a wall clock; the end of the day is '24:00'.
 *
 * @example formatMinute(420) // => '07:00'
 */
export function formatMinute(minute: number): string {
  return `${String(Math.floor(minute / 60)).padStart(2, '0')}:${String(minute % 60).padStart(2, '0')}`
}

const clock = (refusal: string) =>
  z.string().transform((text, context) => {
    const minute = readClock(text)
    if (minute !== null) return minute
    context.addIssue({ code: 'custom', message: refusal })
    return z.NEVER
  })

/** The start of a stretch of a day, typed; minutes after midnight. */
export const startClock = clock('A time of day, such as 07:00.').refine((minute) => minute < DAY_MINUTES, 'It starts before 24:00.')

/** The end of a stretch of a day, typed: midnight is the end of the day, as 24:00 or as 00:00. */
export const endClock = clock('A time of day, such as 16:30.').transform((minute) => (minute === 0 ? DAY_MINUTES : minute))
