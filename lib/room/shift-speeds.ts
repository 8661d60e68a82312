import { millisecondsInHour } from 'date-fns/constants'
import { cutCurve, roomDose } from '@/lib/drying/room-curve'
import type { RoomCurve } from '@/lib/drying/types'
import { formatClock, formatWeekday } from '@/lib/format/local-time'
import type { Shift } from '@/lib/schedule/shifts'

/** Mean speed of a shift, or of the closed time between two, as a share of the reference speed; null where under half of it is known. */
export type ShiftSpeed = { name: string; from: number; to: number; speed: number | null; when: 'past' | 'now' | 'forecast' }

/** A closed time longer than this is no night. */
const LONGEST_NIGHT_MS = 20 * millisecondsInHour

/**
 * How fast the room dried by day and by night: shifts and the closed times between them that touch [from, to).
 *
 * @param shifts in order, all that touch the time; none before the first or behind the last.
 */
export function shiftSpeeds(
  curve: RoomCurve,
  shifts: readonly Shift[],
  { from, to, now, timeZone }: { from: number; to: number; now: number; timeZone: string },
): ShiftSpeed[] {
  const [first] = shifts
  const before = first && first.opensAt > from ? [{ name: untilName(first.opensAt, timeZone), from, to: first.opensAt }] : []
  const stretches = shifts.flatMap((shift, index) => {
    const day = { name: `${formatWeekday(shift.opensAt, timeZone)} day`, from: shift.opensAt, to: shift.closesAt }
    // Behind the last of them the doors stay closed.
    const opensAgain = shifts[index + 1]?.opensAt ?? to
    if (opensAgain <= shift.closesAt) return [day]
    return [day, { name: closedName(shift.closesAt, opensAgain, timeZone), from: shift.closesAt, to: opensAgain }]
  })
  return [...before, ...stretches]
    .filter((stretch) => stretch.to > from && stretch.from < to)
    .map((stretch) => ({
      ...stretch,
      speed: meanSpeed(curve, stretch.from, stretch.to),
      when: stretch.to <= now ? 'past' : stretch.from >= now ? 'forecast' : 'now',
    }))
}

/** A closed time of which no beginning is in sight. */
const untilName = (to: number, timeZone: string) => `closed until ${formatWeekday(to, timeZone)} ${formatClock(to, timeZone)}`

function closedName(from: number, to: number, timeZone: string): string {
  if (to - from <= LONGEST_NIGHT_MS) return `${formatWeekday(from, timeZone)} night`
  return `closed ${formatWeekday(from, timeZone)} ${formatClock(from, timeZone)} to ${formatWeekday(to, timeZone)} ${formatClock(to, timeZone)}`
}

/** Mean speed of a room from one instant to another, over what is known of it; null where that is under half. */
export function meanSpeed(curve: RoomCurve, from: number, to: number): number | null {
  const knownMs = cutCurve(curve, from, to).reduce((sum, segment) => sum + (segment.to - segment.from), 0)
  if (to <= from || knownMs < (to - from) / 2) return null
  return roomDose(curve, from, to).likely / (knownMs / millisecondsInHour)
}

/** Times in [from, to) in which nobody is here: between the shifts. None where a foundry has no hours of its own. */
export function closedStretches(shifts: readonly Shift[], from: number, to: number): { from: number; to: number }[] {
  const closed: { from: number; to: number }[] = []
  let cursor = from
  for (const shift of shifts) {
    if (shift.opensAt > cursor) closed.push({ from: cursor, to: Math.min(shift.opensAt, to) })
    cursor = Math.max(cursor, shift.closesAt)
    if (cursor >= to) break
  }
  if (cursor < to) closed.push({ from: cursor, to })
  return closed.filter((stretch) => stretch.to > stretch.from)
}
