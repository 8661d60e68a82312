import { TZDate } from '@date-fns/tz'
import { assertWithin } from '@/lib/drying/guards'
import { placeFactor } from '@/lib/drying/place-factor'
import type { FanHours, Instant, PlaceAir } from '@/lib/drying/types'

/** A stretch of time at one place with its fans in one state. */
export type PlaceSpan = { from: Instant; to: Instant; placeFactor: number }

export type PlaceSpansInput = { from: Instant; to: Instant; place: PlaceAir; pressurePa: number; timeZone: string }

/**
 * Splits [from, to) where a place's fans go on and off by its timetable. Fans are off where no row says otherwise.
 *
 * Shape: spans in order, touching each other, from `from` to `to`; none where `to` is not after `from`.
 * Units: instants in epoch ms; the timetable is read as wall-clock time in the IANA zone, on the days of a clock change too.
 *
 * @throws {RangeError} if an end is not finite, a zone is unknown, or a row does not run from 0 to 1440 minutes, off after on.
 * @source our own model: a place has one air speed with fans on and one with fans off.
 */
export function placeSpans({ from, to, place, pressurePa, timeZone }: PlaceSpansInput): PlaceSpan[] {
  if (!Number.isFinite(from) || !Number.isFinite(to)) throw new RangeError('Both ends of a stay at a place must be finite instants.')
  const factorOn = placeFactor(place.airSpeedFansOnMps, pressurePa)
  const factorOff = placeFactor(place.airSpeedFansOffMps, pressurePa)
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
  for (const fans of fansOnWithin(from, to, place.fanHours, timeZone)) {
    add(fans.from, factorOff)
    add(fans.to, factorOn)
  }
  add(to, factorOff)
  return spans
}

/** Stretches with the fans on, by start, for every local day that [from, to) touches. They may overlap. */
function fansOnWithin(from: Instant, to: Instant, fanHours: readonly FanHours[], timeZone: string): { from: Instant; to: Instant }[] {
  for (const { weekday, onMinute, offMinute } of fanHours) {
    assertWithin('Weekday', weekday, 1, 7)
    assertWithin('Minute of fans on', onMinute, 0, 1439)
    assertWithin('Minute of fans off', offMinute, onMinute + 1, 1440)
  }
  const local = new TZDate(from, timeZone)
  if (Number.isNaN(local.getTime())) throw new RangeError(`Unknown time zone ${JSON.stringify(timeZone)}.`)
  if (fanHours.length === 0) return []
  const atMinute = (day: number, minute: number): Instant =>
    new TZDate(local.getFullYear(), local.getMonth(), local.getDate() + day, 0, minute, 0, 0, timeZone).getTime()
  const stretches: { from: Instant; to: Instant }[] = []
  for (let day = 0; atMinute(day, 0) < to; day += 1) {
    const weekday = new TZDate(atMinute(day, 0), timeZone).getDay() || 7
    for (const row of fanHours) {
      if (row.weekday === weekday) stretches.push({ from: atMinute(day, row.onMinute), to: atMinute(day, row.offMinute) })
    }
  }
  return stretches.toSorted((a, b) => a.from - b.from)
}
