import type { DateForm } from '@/lib/uploads/upload-settings'

/** A time as it is written. `wallMs`: its date and clock, as if they were UTC. `offsetMinutes`: where the text itself says it; else null. */
export type WrittenMoment = { wallMs: number; offsetMinutes: number | null }

const MONTHS = ['jan', 'feb', 'mar', 'apr', 'may', 'jun', 'jul', 'aug', 'sep', 'oct', 'nov', 'dec']
const WEEKDAY = /^(?:mon|tue|wed|thu|fri|sat|sun)[a-z]*\.?,?\s+/i
const COMPACT = /^(\d{4})(\d{2})(\d{2})(?=$|[T\s_-])/i
const DATE = /^(\d{1,4}|[a-z]{3,9})\.?[\s./-]+(\d{1,2}|[a-z]{3,9})\.?[\s.,/-]+(\d{4}|\d{1,2})(?!\d)\.?/i
const CLOCK =
  /^(\d{1,2})(?:[:.h](\d{2})(?:[:.](\d{2})(?:[.,](\d{1,9}))?)?)?\s*(?:([ap])\.?\s?m\.?)?\s*(?:(Z|UTC|GMT)?\s*([+-]\d{2}:?\d{2}|[+-]\d{2})?)$/i
const COMPACT_CLOCK = /^(\d{2})(\d{2})(\d{2})?(Z)?$/i
/** Of this century: the two can be told apart by their length. */
const EPOCH = { 'epoch s': /^\d{9,10}(?:\.\d+)?$/, 'epoch ms': /^\d{12,13}(?:\.\d+)?$/ } as const

/** Two-digit years are of this century up to 69, as everywhere. */
const fullYear = (text: string) => (text.length > 2 ? Number(text) : Number(text) + (Number(text) < 70 ? 2000 : 1900))

const monthOf = (text: string) => MONTHS.indexOf(text.slice(0, 3).toLowerCase()) + 1

const isNamed = (part: string) => /^[a-z]/i.test(part)

/** Date and what is left of the text behind it; null where no such date is written. */
function readDate(text: string, form: DateForm): { dayMs: number; rest: string } | null {
  const compact = form === 'ymd' ? COMPACT.exec(text) : null
  const [all, one = '', two = '', three = ''] = compact ?? DATE.exec(text) ?? []
  if (all === undefined) return null
  let [year, month, day] = ['', 0, 0]
  // A month by its name leaves nothing to choose.
  if (isNamed(one)) [year, month, day] = [three, monthOf(one), Number(two)]
  else if (isNamed(two) && one.length === 4) [year, month, day] = [one, monthOf(two), Number(three)]
  else if (isNamed(two)) [year, month, day] = [three, monthOf(two), Number(one)]
  else if (form === 'ymd') [year, month, day] = [one, Number(two), Number(three)]
  else if (form === 'dmy') [year, month, day] = [three, Number(two), Number(one)]
  else [year, month, day] = [three, Number(one), Number(two)]
  if (year.length === 3 || year.length === 1 || month < 1 || month > 12 || !(day >= 1)) return null
  const dayMs = Date.UTC(fullYear(year), month - 1, day)
  return new Date(dayMs).getUTCDate() === day ? { dayMs, rest: text.slice(all.length) } : null
}

/** Clock in milliseconds after midnight, and the offset behind it. */
function readClock(text: string): { clockMs: number; offsetMinutes: number | null } | null {
  const compact = COMPACT_CLOCK.exec(text)
  if (compact) {
    const [, hours, minutes, seconds = '0', utc] = compact
    return clockParts({ hours: Number(hours), minutes: Number(minutes), seconds: Number(seconds), fraction: '', offset: utc ? 0 : null })
  }
  const [all, hours, minutes, seconds = '0', fraction = '', half, utc, offset] = CLOCK.exec(text) ?? []
  if (all === undefined || hours === undefined || (minutes === undefined && half === undefined)) return null
  const hour = Number(hours)
  if (half !== undefined && (hour < 1 || hour > 12)) return null
  const ofDay = half === undefined ? hour : (hour % 12) + (half.toLowerCase() === 'p' ? 12 : 0)
  const own = offset === undefined ? (utc === undefined ? null : 0) : readOffset(offset)
  return clockParts({ hours: ofDay, minutes: Number(minutes ?? 0), seconds: Number(seconds), fraction, offset: own })
}

type ClockParts = { hours: number; minutes: number; seconds: number; fraction: string; offset: number | null }

function clockParts({ hours, minutes, seconds, fraction, offset }: ClockParts): { clockMs: number; offsetMinutes: number | null } | null {
  if (hours > 24 || minutes > 59 || seconds > 59 || (hours === 24 && minutes + seconds > 0)) return null
  const clockMs = ((hours * 60 + minutes) * 60 + seconds) * 1000 + Math.round(Number(`0.${fraction || '0'}`) * 1000)
  return { clockMs, offsetMinutes: offset }
}

/**
 * Minutes east of UTC.
 *
 * @example readOffset('+02:00') // => 120
 * @example readOffset('-0330') // => -210
 */
export function readOffset(text: string): number {
  const [, sign, hours, minutes = '0'] = /^([+-])(\d{2}):?(\d{2})?$/.exec(text) ?? []
  return (sign === '-' ? -1 : 1) * (Number(hours) * 60 + Number(minutes))
}

/**
 * Reads a time as loggers write it. The separators and a clock of twelve hours with am and pm are seen by themselves; a month may stand
 * there by its English name.
 *
 * @param clock the cell of the clock where it stands apart from the date; null where one cell holds both.
 * @returns null when the text is no such time.
 * @example readMoment('13/10/2026 2:05 PM', null, 'dmy') // => 14:05 of 13 October as wallMs, without an offset
 */
export function readMoment(date: string, clock: string | null, form: DateForm): WrittenMoment | null {
  const text = date.trim()
  if (form === 'epoch s' || form === 'epoch ms') {
    if (!EPOCH[form].test(text)) return null
    return { wallMs: Math.round(Number(text) * (form === 'epoch s' ? 1000 : 1)), offsetMinutes: 0 }
  }
  const dated = readDate(text.replace(WEEKDAY, ''), form)
  if (!dated) return null
  const rest = dated.rest.replace(/^[\s,T_-]+/i, '')
  // A spreadsheet writes a date in a cell of its own with a clock of 00:00:00 behind it.
  const timed = readClock((clock ?? rest).trim())
  return timed && { wallMs: dated.dayMs + timed.clockMs, offsetMinutes: timed.offsetMinutes }
}

/** Whether a month stands there by name, so that the order of the parts is no question. */
export function hasMonthName(text: string): boolean {
  return /[a-z]{3,}/i.test(text.replace(WEEKDAY, '').replace(/utc|gmt/i, ''))
}
