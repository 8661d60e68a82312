import { millisecondsInHour, millisecondsInMinute } from 'date-fns/constants'
import { cutCurve, roomDose } from '@/lib/drying/room-curve'
import { steadyRate } from '@/lib/drying/room-segments'
import type { DoseHour, Instant, RoomCurve, RoomSegment } from '@/lib/drying/types'

/** Start of the UTC hour that holds an instant. */
export function hourStartOf(at: Instant): Instant {
  return Math.floor(at / millisecondsInHour) * millisecondsInHour
}

/**
 * Rows of the hourly table: the dose of one room in every whole UTC hour of [fromHour, toHour).
 *
 * An hour without readings gives a row of zeros. The row of an hour is final once a reading has come after its end; a late
 * reading changes the hours from the reading before it to the reading after it, and no other.
 *
 * @throws {RangeError} if an end is not a whole UTC hour.
 */
export function hourDoses(curve: RoomCurve, fromHour: Instant, toHour: Instant): DoseHour[] {
  if (hourStartOf(fromHour) !== fromHour || hourStartOf(toHour) !== toHour) {
    throw new RangeError('Hourly doses begin and end on whole UTC hours.')
  }
  const rows: DoseHour[] = []
  for (let hourStart = fromHour; hourStart < toHour; hourStart += millisecondsInHour) {
    const hourEnd = hourStart + millisecondsInHour
    const parts = cutCurve(curve, hourStart, hourEnd)
    rows.push({
      hourStart,
      dose: roomDose(curve, hourStart, hourEnd),
      coveredMinutes: minutesOf(parts),
      gapMinutes: minutesOf(parts.filter((part) => part.kind === 'gap')),
      hasTyped: parts.some((part) => part.kind === 'typed'),
    })
  }
  return rows
}

function minutesOf(segments: readonly RoomSegment[]): number {
  return segments.reduce((sum, { from, to }) => sum + (to - from), 0) / millisecondsInMinute
}

/** Segments of one rate for whole hours from the table. Their dose is right for whole hours only; hours without a reading are left out. */
export function segmentsFromHours(rows: readonly DoseHour[]): RoomSegment[] {
  return rows
    .filter((row) => row.coveredMinutes > 0)
    .toSorted((a, b) => a.hourStart - b.hourStart)
    .map(({ hourStart, dose }) => ({
      from: hourStart,
      to: hourStart + millisecondsInHour,
      kind: 'hour',
      likely: steadyRate(dose.likely),
      low: steadyRate(dose.low),
      high: steadyRate(dose.high),
    }))
}

/**
 * Puts exact segments in place of a coarse curve inside the refined ranges: the coarse hours between, the readings of the
 * two end hours. For the exact hour take its readings, the one before it and the one after it.
 *
 * Property: a dose from one instant to another, both inside refined ranges made of whole hours, is that of all readings.
 */
export function spliceCurve(coarse: RoomCurve, exact: RoomCurve, refined: readonly { from: Instant; to: Instant }[]): RoomSegment[] {
  const spliced: RoomSegment[] = []
  let cursor: Instant = -Infinity
  for (const range of refined.toSorted((a, b) => a.from - b.from)) {
    const from = Math.max(range.from, cursor)
    const to = Math.max(range.to, from)
    spliced.push(...cutCurve(coarse, cursor, from), ...cutCurve(exact, from, to))
    cursor = to
  }
  spliced.push(...cutCurve(coarse, cursor, Infinity))
  return spliced
}

/** Mean room factor of a row whose hour has no hole and no gap; null for any other. */
export function meanRoomFactor(row: DoseHour): number | null {
  const isWhole = row.coveredMinutes >= 60 - 1e-6 && row.gapMinutes === 0
  return isWhole ? row.dose.likely : null
}
