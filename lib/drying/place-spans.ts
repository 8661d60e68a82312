import { fansOnWithin } from '@/lib/drying/fan-timetable'
import { fanFactors } from '@/lib/drying/place-factor'
import type { FanOverride, Instant, PlaceAir } from '@/lib/drying/types'

/** A stretch of time at one place with its fans in one state. */
export type PlaceSpan = { from: Instant; to: Instant; placeFactor: number }

export type PlaceSpansInput = {
  from: Instant
  to: Instant
  place: PlaceAir
  /** What people said against the timetable, in order, not overlapping. */
  overrides: readonly FanOverride[]
  pressurePa: number
  timeZone: string
}

/**
 * Splits [from, to) where a place's fans go on and off: by a person's word while it stands, else by the timetable. Fans are off where
 * no row of it says otherwise.
 *
 * Shape: spans in order, touching each other, from `from` to `to`; none where `to` is not after `from`.
 * Units: instants in epoch ms; the timetable is read as wall-clock time in the IANA zone, on the days of a clock change too.
 *
 * @throws {RangeError} if an end is not finite, a zone is unknown, or a row does not run from 0 to 1440 minutes, off after on.
 * @source our own model: a place has one air speed with fans on and one with fans off.
 */
export function placeSpans({ from, to, place, overrides, pressurePa, timeZone }: PlaceSpansInput): PlaceSpan[] {
  if (!Number.isFinite(from) || !Number.isFinite(to)) throw new RangeError('Both ends of a stay at a place must be finite instants.')
  const factors = fanFactors(place, pressurePa)
  const on = fansOnWithin(from, to, place.fanHours, timeZone)
  const spans: PlaceSpan[] = []
  let cursor = from
  const add = (until: Instant, factor: number) => {
    const end = Math.min(until, to)
    if (end <= cursor) return
    const last = spans.at(-1)
    if (last?.placeFactor === factor) last.to = end
    else spans.push({ from: cursor, to: end, placeFactor: factor })
    cursor = end
  }
  let next = 0
  const addByTimetable = (until: Instant) => {
    for (; next < on.length; next += 1) {
      const stretch = on[next]!
      add(Math.min(stretch.from, until), factors.off)
      add(Math.min(stretch.to, until), factors.on)
      // The rest of it may stand after an override.
      if (stretch.to > until) break
    }
    add(until, factors.off)
  }
  for (const override of overrides) {
    addByTimetable(override.from)
    add(override.to, override.isOn ? factors.on : factors.off)
  }
  addByTimetable(to)
  return spans
}
