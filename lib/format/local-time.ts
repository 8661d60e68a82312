const formatters = new Map<string, Intl.DateTimeFormat>()

/** One formatter per zone and shape: building one costs more than a thousand uses of it. */
function formatter(timeZone: string, shape: string, options: Intl.DateTimeFormatOptions): Intl.DateTimeFormat {
  const key = `${timeZone} ${shape}`
  const known = formatters.get(key)
  if (known) return known
  const made = new Intl.DateTimeFormat('en-GB', { timeZone, ...options })
  formatters.set(key, made)
  return made
}

/** Local wall clock, 24 h: '15:35'. */
export function formatClock(at: number, timeZone: string): string {
  return formatter(timeZone, 'clock', { hour: '2-digit', minute: '2-digit', hourCycle: 'h23' }).format(at)
}

/** Local calendar day as text, '2026-10-13': to compare days, never to add to. */
export function localDay(at: number, timeZone: string): string {
  const parts = formatter(timeZone, 'day', { year: 'numeric', month: '2-digit', day: '2-digit' }).formatToParts(at)
  const part = (type: string) => parts.find((candidate) => candidate.type === type)?.value ?? ''
  return `${part('year')}-${part('month')}-${part('day')}`
}

/** Local day of the week, 'Wed'. */
export function formatWeekday(at: number, timeZone: string): string {
  return formatter(timeZone, 'weekday', { weekday: 'short' }).format(at)
}

/** 'Tue 13 Oct'. */
export function formatDate(at: number, timeZone: string): string {
  const parts = formatter(timeZone, 'date', { weekday: 'short', day: 'numeric', month: 'short' }).formatToParts(at)
  const part = (type: string) => parts.find((candidate) => candidate.type === type)?.value ?? ''
  // en-GB says 'Sept'; three letters keep columns even.
  return `${part('weekday')} ${part('day')} ${part('month').slice(0, 3)}`
}

/** With its year, for what may lie long ago: 'Tue 13 Oct 2026'. */
export function formatDateOfYear(at: number, timeZone: string): string {
  return `${formatDate(at, timeZone)} ${localDay(at, timeZone).slice(0, 4)}`
}

/** A stored day such as a pour date: '2026-10-13' as 'Tue 13 Oct'. A day has no zone. */
export function formatDay(day: string): string {
  return formatDate(Date.parse(`${day}T12:00:00Z`), 'UTC')
}

function daysBetween(from: string, to: string): number {
  return Math.round((Date.parse(`${to}T00:00:00Z`) - Date.parse(`${from}T00:00:00Z`)) / 86_400_000)
}

/** The day to say before a time: '' for today, 'Wed' within six days either way, else 'Wed 21 Oct'. */
export function dayWord(at: number, now: number, timeZone: string): string {
  const distance = daysBetween(localDay(now, timeZone), localDay(at, timeZone))
  if (distance === 0) return ''
  return Math.abs(distance) <= 6 ? formatWeekday(at, timeZone) : formatDate(at, timeZone)
}

/** '15:35' today, 'Wed 22:00' another day, 'Wed 21 Oct 22:00' further off. */
export function formatMoment(at: number, now: number, timeZone: string): string {
  const day = dayWord(at, now, timeZone)
  return day === '' ? formatClock(at, timeZone) : `${day} ${formatClock(at, timeZone)}`
}
