import { TZDate } from '@date-fns/tz'
import { millisecondsInDay, millisecondsInMinute } from 'date-fns/constants'
import { unitOf } from '@/lib/demo/random'
import type { DemoBath, DemoSetting } from '@/lib/demo/shop'
import { COATING_WAYS, STUCCOS, type CoatingWay, type Stucco } from '@/lib/coats/vocabulary'
import { shiftsFrom, type Shift } from '@/lib/schedule/shifts'

/** When people were at work over the history, in order. */
export type WorkHours = { timeZone: string; shifts: readonly Shift[] }

const WEEK_MS = 7 * millisecondsInDay

/** The shifts that touch [from, to]. */
export function workHours(from: number, to: number, { calendar, timeZone }: Pick<DemoSetting, 'calendar' | 'timeZone'>): WorkHours {
  const byOpening = new Map<number, Shift>()
  for (let at = from; at <= to + WEEK_MS; at += WEEK_MS) {
    for (const shift of shiftsFrom(at, calendar, timeZone)) byOpening.set(shift.opensAt, shift)
  }
  return { timeZone, shifts: [...byOpening.values()].filter((shift) => shift.opensAt <= to).toSorted((a, b) => a.opensAt - b.opensAt) }
}

/** The shift that an instant lies in, its ends included. */
export function shiftAt({ shifts }: WorkHours, at: number): Shift | null {
  return shifts.findLast((shift) => shift.opensAt <= at && at <= shift.closesAt) ?? null
}

/** The newest instant at or before `at` with people at work, `margin` ms after the opening at least; null before the history. */
export function lastAtWork({ shifts }: WorkHours, at: number, margin = 0): number | null {
  const shift = shifts.findLast((candidate) => candidate.opensAt + margin <= at)
  return shift ? Math.min(at, shift.closesAt) : null
}

/**
 * How odd it is that somebody dips at an instant: 0 in a shift, 1 for an extra turn on a day off or in the evening,
 * 2 for an early or a late one, 4 at night.
 */
export function oddness(hours: WorkHours, at: number): number {
  if (shiftAt(hours, at)) return 0
  const hour = new TZDate(at, hours.timeZone).getHours()
  if (hour >= 8 && hour < 19) return 1
  return hour >= 6 && hour < 22 ? 2 : 4
}

const SLOT_MS = 30 * millisecondsInMinute
/** Stirring and sweeping come first. */
const AFTER_OPENING_MS = 12 * millisecondsInMinute

/**
 * The newest moment at or before `at` at which this kind of run goes through a bath: twice an hour, each kind at its own minute,
 * so that trees that are due together share a run.
 *
 * @param turns 'shifts' only, or an extra turn on a day off too.
 * @returns null before the history.
 */
export function lastRunSlot(
  hours: WorkHours,
  at: number,
  { bath, stucco, way }: { bath: DemoBath; stucco: Stucco; way: CoatingWay },
  turns: 'shifts' | 'extra too' = 'shifts',
): number | null {
  const kind = 4 * COATING_WAYS.indexOf(way) + 3 * STUCCOS.indexOf(stucco) + (bath === 'face' ? 1 : 0)
  const opensAt = hours.shifts[0]?.opensAt ?? Infinity
  for (let slot = Math.floor(at / SLOT_MS) * SLOT_MS; slot >= opensAt; slot -= SLOT_MS) {
    const seconds = Math.floor(unitOf(31, slot, kind) * 200)
    const dippedAt = slot + kind * millisecondsInMinute + seconds * 1000
    if (dippedAt > at) continue
    const shift = shiftAt(hours, dippedAt)
    if (shift ? dippedAt >= shift.opensAt + AFTER_OPENING_MS : turns === 'extra too' && oddness(hours, dippedAt) === 1) return dippedAt
  }
  return null
}
