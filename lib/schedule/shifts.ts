import { TZDate } from '@date-fns/tz'

/** One local weekday's opening hours, minutes after local midnight; weekday 1 is Monday. A weekday without a row is closed. */
export type ShiftHours = { weekday: number; opensMinute: number; closesMinute: number }

/** Local days on which nobody dips, 'YYYY-MM-DD', both ends included. */
export type ClosedDays = { firstDay: string; lastDay: string }

/** When the foundry works: the hours of its week, less its closed days. Without any hours it is open around the clock. */
export type WorkCalendar = { hours: readonly ShiftHours[]; closures: readonly ClosedDays[] }

export type Shift = { opensAt: number; closesAt: number }

/** As far as the clock looks ahead, and a day more. */
const DAYS_AHEAD = 15
/** This shift and the next one: there is a next one however long the foundry is closed. */
const LEAST_SHIFTS = 2
/** Closed for longer than this is closed for good. */
const MOST_DAYS = 800

const AROUND_THE_CLOCK = { opensMinute: 0, closesMinute: 1440 }

/**
 * Shifts that end after `from`, in order, over the next fortnight, and further on until there are two. Closed days are skipped.
 *
 * Units: epoch milliseconds; the hours are wall-clock time in the IANA zone, so a clock change moves the instant and not the hour.
 */
export function shiftsFrom(from: number, calendar: WorkCalendar, timeZone: string): Shift[] {
  const local = new TZDate(from, timeZone)
  const shifts: Shift[] = []
  for (let day = 0; day < MOST_DAYS && (day < DAYS_AHEAD || shifts.length < LEAST_SHIFTS); day += 1) {
    const noon = new TZDate(local.getFullYear(), local.getMonth(), local.getDate() + day, 12, 0, 0, 0, timeZone)
    const shift = shiftOf(noon, calendar, timeZone)
    if (shift && shift.closesAt > from) shifts.push(shift)
  }
  return shifts
}

/** The shift of the local day that a moment lies in; null when it is closed. */
function shiftOf(moment: TZDate, { hours, closures }: WorkCalendar, timeZone: string): Shift | null {
  const weekday = moment.getDay() || 7
  const row = hours.length === 0 ? AROUND_THE_CLOCK : hours.find((candidate) => candidate.weekday === weekday)
  if (!row || isClosedDay(dayOf(moment), closures)) return null
  const at = (minute: number) => new TZDate(moment.getFullYear(), moment.getMonth(), moment.getDate(), 0, minute, 0, 0, timeZone).getTime()
  return { opensAt: at(row.opensMinute), closesAt: at(row.closesMinute) }
}

/** Whether a local day, 'YYYY-MM-DD', is one of the closed ones. */
export function isClosedDay(day: string, closures: readonly ClosedDays[]): boolean {
  return closures.some(({ firstDay, lastDay }) => firstDay <= day && day <= lastDay)
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

const dayOf = (local: TZDate) => `${local.getFullYear()}-${pad(local.getMonth() + 1)}-${pad(local.getDate())}`

/**
 * The moment by which a shell has to be dried out to be poured on a day: when that day's shift opens, or local midnight on a closed day.
 * Common practice, no source: burnout and the second heat take the morning of the pour.
 */
export function pourDeadline(pourDate: string, calendar: WorkCalendar, timeZone: string): number {
  const start = startOfLocalDay(pourDate, timeZone)
  return shiftOf(new TZDate(start, timeZone), calendar, timeZone)?.opensAt ?? start
}
