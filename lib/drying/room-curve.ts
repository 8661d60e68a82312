import { millisecondsInHour } from 'date-fns/constants'
import type { Dose, Instant, Rate, RoomCurve, RoomSegment } from '@/lib/drying/types'

export const NO_DOSE: Dose = { likely: 0, low: 0, high: 0 }

/** Two doses closer than this, in reference hours, are the same: rounding of sums must not move a time past a hole. */
export const DOSE_EPSILON = 1e-9

const BOUNDS = ['likely', 'low', 'high'] as const

/** Dose before each segment of a curve, and after the last one: one entry more than there are segments. */
type CurveIndex = Record<keyof Dose, Float64Array>

const indexes = new WeakMap<RoomCurve, CurveIndex>()

/**
 * Adds up a curve once, so that every tree in the room shares the sums. Kept for as long as the array lives: hand the same
 * array to all spans of a room, and never change it. Called by the functions below when needed.
 *
 * @throws {RangeError} if a segment is empty, overlaps the one before, or has a rate that is negative or not a number.
 */
export function indexCurve(curve: RoomCurve): CurveIndex {
  const known = indexes.get(curve)
  if (known) return known
  const size = curve.length + 1
  const index: CurveIndex = { likely: new Float64Array(size), low: new Float64Array(size), high: new Float64Array(size) }
  for (const [position, segment] of curve.entries()) {
    if (!(segment.to > segment.from)) throw new RangeError('A segment of a room curve must end after it starts.')
    if (segment.from < (curve[position - 1]?.to ?? -Infinity)) throw new RangeError('Segments of a room curve must be in order.')
    for (const bound of BOUNDS) {
      const { start, end } = segment[bound]
      if (!(start >= 0 && end >= 0)) throw new RangeError('A drying rate must be a number of 0 or more.')
      index[bound][position + 1] = index[bound][position]! + doseWithin(segment, bound, segment.to)
    }
  }
  indexes.set(curve, index)
  return index
}

/**
 * Dose that a room gives from one instant to another at a place factor of 1, reference hours. Holes credit nothing.
 * Costs one binary search for each end, whatever the length of the curve. An end may be Infinity.
 *
 * @throws {RangeError} if an end is not a number.
 * @source prefix sums of the trapezoid rule, exact for rates that are straight lines.
 */
export function roomDose(curve: RoomCurve, from: Instant, to: Instant): Dose {
  if (Number.isNaN(from) || Number.isNaN(to)) throw new RangeError('Both ends of a dose must be instants.')
  if (to <= from) return NO_DOSE
  return {
    likely: doseUpTo(curve, to, 'likely') - doseUpTo(curve, from, 'likely'),
    low: doseUpTo(curve, to, 'low') - doseUpTo(curve, from, 'low'),
    high: doseUpTo(curve, to, 'high') - doseUpTo(curve, from, 'high'),
  }
}

/**
 * First whole millisecond at which the room has given `dose` reference hours since `from`; null when the curve ends first.
 *
 * @source binary search over the prefix sums, then the root of start u + (end - start) u^2 / (2 dt) = rest.
 */
export function instantAtDose(curve: RoomCurve, from: Instant, dose: number, bound: keyof Dose): Instant | null {
  if (!(dose > 0)) return from
  const before = indexCurve(curve)[bound]
  const target = doseUpTo(curve, from, bound) + dose
  const position = firstIndex(curve.length, (candidate) => before[candidate + 1]! >= target - DOSE_EPSILON)
  const segment = curve[position]
  if (segment === undefined) return null
  const rest = (target - before[position]!) * millisecondsInHour
  const at = segment.from + timeToGive(rest, segment[bound], segment.to - segment.from)
  return Math.max(from, Math.min(Math.ceil(at - 1e-6), segment.to))
}

/** Milliseconds after which a rate that runs on a straight line over `lengthMs` has given `rest` (rate x ms). Stable where it hardly slopes. */
function timeToGive(rest: number, { start, end }: Rate, lengthMs: number): number {
  if (rest <= 0) return 0
  const slope = (end - start) / lengthMs
  const root = Math.sqrt(Math.max(0, start * start + 2 * slope * rest))
  return (2 * rest) / (start + root)
}

/** Dose from the beginning of the curve to `at`. */
function doseUpTo(curve: RoomCurve, at: Instant, bound: keyof Dose): number {
  const before = indexCurve(curve)[bound]
  const position = firstIndex(curve.length, (candidate) => curve[candidate]!.from > at) - 1
  const segment = curve[position]
  if (segment === undefined) return 0
  if (at >= segment.to) return before[position + 1]!
  return before[position]! + doseWithin(segment, bound, at)
}

/** Dose from the start of a segment to an instant inside it. */
function doseWithin(segment: RoomSegment, bound: keyof Dose, at: Instant): number {
  const elapsed = at - segment.from
  const { start } = segment[bound]
  return ((start + rateAt(segment, bound, at)) / 2) * (elapsed / millisecondsInHour)
}

/** Drying rate at an instant inside a segment, reference hours per hour. */
export function rateAt(segment: RoomSegment, bound: keyof Dose, at: Instant): number {
  const { start, end } = segment[bound]
  return start + (end - start) * ((at - segment.from) / (segment.to - segment.from))
}

/** Smallest index from 0 to length for which `holds`, which must stay true once it is; `length` when it never is. */
function firstIndex(length: number, holds: (index: number) => boolean): number {
  let below = 0
  let above = length
  while (below < above) {
    const middle = (below + above) >>> 1
    if (holds(middle)) above = middle
    else below = middle + 1
  }
  return below
}

/** The part of a curve inside [from, to), its end segments cut to fit. */
export function cutCurve(curve: RoomCurve, from: Instant, to: Instant): RoomSegment[] {
  const first = firstIndex(curve.length, (candidate) => curve[candidate]!.to > from)
  const end = firstIndex(curve.length, (candidate) => curve[candidate]!.from >= to)
  return curve
    .slice(first, Math.max(first, end))
    .map((segment) => cutSegment(segment, Math.max(segment.from, from), Math.min(segment.to, to)))
}

function cutSegment(segment: RoomSegment, from: Instant, to: Instant): RoomSegment {
  if (from === segment.from && to === segment.to) return segment
  const cut = (bound: keyof Dose): Rate => ({ start: rateAt(segment, bound, from), end: rateAt(segment, bound, to) })
  return { from, to, kind: segment.kind, likely: cut('likely'), low: cut('low'), high: cut('high') }
}
