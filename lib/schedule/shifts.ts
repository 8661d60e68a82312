import { TZDate } from '@date-fns/tz'

/** One local weekday's opening hours, minutes after local midnight; weekday 1 is Monday. A weekday without a row is closed. */
export type ShiftHours = { weekday: number; opensMinute: number; closesMinute: number }

export type Shift = { opensAt: number; closesAt: number }

/** How far ahead a shift is looked for. A foundry with no opening hours at all is open around the clock. */
const DAYS_AHEAD = 15

/**
 * Shifts that end after `from`, in order, over the next fortnight.
 *
 * Units: epoch milliseconds; the hours are wall-clock time in the IANA zone, so a clock change moves the instant and not the hour.
 */
export function shiftsFrom(from: number, hours: readonly ShiftHours[], timeZone: string): Shift[] {
  const local = new TZDate(from, timeZone)
  const atMinute = (day: number, minute: number) =>
    new TZDate(local.getFullYear(), local.getMonth(), local.getDate() + day, 0, minute, 0, 0, timeZone).getTime()
  if (hours.length === 0) {
    return Array.from({ length: DAYS_AHEAD }, (_, day) => ({ opensAt: atMinute(day, 0), closesAt: atMinute(day + 1, 0) }))
  }
  const shifts: Shift[] = []
  for (let day = 0; day < DAYS_AHEAD; day += 1) {
    const weekday = new TZDate(atMinute(day, 720), timeZone).getDay() || 7
    const row = hours.find((candidate) => candidate.weekday === weekday)
    if (!row) continue
    const shift = { opensAt: atMinute(day, row.opensMinute), closesAt: atMinute(day, row.closesMinute) }
    if (shift.closesAt > from) shifts.push(shift)
  }
  return shifts
}

/** The first instant at or after `at` that lies in one of the shifts; null when they end before. */
export function nextOpenInstant(at: number, shifts: readonly Shift[]): number | null {
  const shift = shifts.find((candidate) => candidate.closesAt > at)
  return shift ? Math.max(at, shift.opensAt) : null
}

/** Start of a local day ('2026-12-18') in a zone, as an instant. */
export function startOfLocalDay(day: string, timeZone: string): number {
  const [year = 0, month = 1, date = 1] = day.split('-').map(Number)
  return new TZDate(year, month - 1, date, 0, 0, 0, 0, timeZone).getTime()
}

const pad = (value: number) => String(value).padStart(2, '0')

/** The local calendar day of an instant, 'YYYY-MM-DD'. */
export function localDay(at: number, timeZone: string): string {
  const local = new TZDate(at, timeZone)
  return `${local.getFullYear()}-${pad(local.getMonth() + 1)}-${pad(local.getDate())}`
}

/**
 * The moment by which a shell has to be dried out to be poured on a day: when that day's shift opens, or local midnight on a closed day.
 * Common practice, no source: burnout and the second heat take the morning of the pour.
 */
export function pourDeadline(pourDate: string, hours: readonly ShiftHours[], timeZone: string): number {
  const start = startOfLocalDay(pourDate, timeZone)
  const first = shiftsFrom(start, hours, timeZone)[0]
  return first && localDay(first.opensAt, timeZone) === pourDate ? first.opensAt : start
}
