import { millisecondsInHour } from 'date-fns/constants'
import { hourStartOf } from '@/lib/drying/dose-hours'
import { placeSpans, type PlaceSpan } from '@/lib/drying/place-spans'
import type { DryingSpan, ReadingMark, RoomReading, WindowReadings } from '@/lib/drying/types'
import { HORIZON_HOURS, readingsForFlags, type AirStretch, type RoomClimate } from '@/lib/room/climate'
import type { Shift } from '@/lib/schedule/shifts'
import type { PlaceFacts } from '@/lib/trees/facts'

/** Everything about the room that trees share: made once a pass. */
export type FloorContext = {
  now: number
  timeZone: string
  pressurePa: number
  climates: ReadonlyMap<number, RoomClimate>
  places: ReadonlyMap<string, PlaceFacts>
  /** Fan-on and fan-off stretches of each place, from the oldest hour in use to the horizon. */
  placeSpans: ReadonlyMap<string, readonly PlaceSpan[]>
  /** Shifts from now on. */
  shifts: readonly Shift[]
}

type ContextInput = Omit<FloorContext, 'placeSpans' | 'climates' | 'places'> & {
  climates: readonly RoomClimate[]
  places: readonly PlaceFacts[]
  /** Oldest instant that any tree's clock needs. */
  from: number
}

/** Makes the context that every tree of one pass is assessed in. */
export function floorContext({ climates, places, from, ...rest }: ContextInput): FloorContext {
  const to = rest.now + HORIZON_HOURS * millisecondsInHour
  const spansOf = (place: PlaceFacts) => placeSpans({ from, to, place, pressurePa: rest.pressurePa, timeZone: rest.timeZone })
  return {
    ...rest,
    climates: bySensor(climates),
    places: new Map(places.map((place) => [place.id, place])),
    placeSpans: new Map(places.map((place) => [place.id, spansOf(place)])),
  }
}

/** The same pass with other climates; places and shifts stand. */
export const withClimates = (context: FloorContext, climates: readonly RoomClimate[]): FloorContext => ({
  ...context,
  climates: bySensor(climates),
})

const bySensor = (climates: readonly RoomClimate[]) => new Map(climates.map((climate) => [climate.sensorId, climate]))

type Stay = { placeId: string; since: number }

/** Stays that matter from an instant on, the first one cut to begin there. */
function staysFrom(stays: readonly Stay[], from: number): Stay[] {
  const current = stays.findLast((stay) => stay.since <= from) ?? stays[0]
  if (!current) return []
  return [{ ...current, since: from }, ...stays.filter((stay) => stay.since > from)]
}

/** A tree's spans from an instant to the horizon: split at every move and at every switch of the fans. */
export function dryingSpans(context: FloorContext, stays: readonly Stay[], from: number): DryingSpan[] {
  const relevant = staysFrom(stays, from)
  return relevant.flatMap((stay, index) => {
    const place = context.places.get(stay.placeId)
    const climate = place && context.climates.get(place.sensorId)
    if (!place || !climate) return []
    const end = relevant[index + 1]?.since ?? Infinity
    return (context.placeSpans.get(place.id) ?? [])
      .filter((span) => span.to > stay.since && span.from < end)
      .map((span) => ({
        from: Math.max(span.from, stay.since),
        to: Math.min(span.to, end),
        placeFactor: span.placeFactor,
        curve: climate.curve,
      }))
  })
}

/** The air that a tree hung in from one instant to another: each room for as long as the tree was there. */
export function airAround(context: FloorContext, stays: readonly Stay[], from: number, to: number): AirStretch[] {
  const relevant = staysFrom(stays, from).filter((stay) => stay.since <= to)
  return relevant.flatMap((stay, index) => {
    const climate = context.climates.get(context.places.get(stay.placeId)?.sensorId ?? -1)
    return climate ? [{ climate, from: stay.since, to: Math.min(to, relevant[index + 1]?.since ?? to) }] : []
  })
}

/** Readings for the flags of the air that a tree hung in: a shell carried into a dry room has still hung damp. */
export function readingsAround(context: FloorContext, stays: readonly Stay[], from: number, to: number): RoomReading[] {
  return airAround(context, stays, from, to).flatMap((air) => readingsForFlags(air.climate, air.from, air.to))
}

const markOf = (reading: ReadingMark | null | undefined): ReadingMark | null =>
  reading ? { measuredAt: reading.measuredAt, source: reading.source } : null

/**
 * The readings that stand behind a coat from its clock's start to `at`, of the sensors of the places where it hung in their turn.
 * Whole hours count by their row of the hourly table, the hour of the start by its readings.
 */
export function readingsBehind(context: FloorContext, stays: readonly Stay[], start: number, at: number): WindowReadings {
  // While a coat still drains its clock starts a moment ahead.
  const relevant = staysFrom(stays, start).filter((stay) => stay.since <= Math.max(at, start))
  const climateOf = (stay: Stay | undefined) => context.climates.get(context.places.get(stay?.placeId ?? '')?.sensorId ?? -1)
  let sensorCount = 0
  let typedCount = 0
  let firstInWindowAt: number | null = null
  for (const [index, stay] of relevant.entries()) {
    const climate = climateOf(stay)
    if (!climate) continue
    const to = Math.min(at, relevant[index + 1]?.since ?? at)
    const touchedHours = new Set<number>()
    const countsByRow = (hour: number) => hour > stay.since && !climate.refinedHours.has(hour)
    for (const reading of climate.exact) {
      if (reading.measuredAt <= stay.since || reading.measuredAt > to) continue
      const hour = hourStartOf(reading.measuredAt)
      touchedHours.add(hour)
      firstInWindowAt = Math.min(firstInWindowAt ?? Infinity, reading.measuredAt)
      if (countsByRow(hour)) continue
      if (reading.source === 'typed') typedCount += 1
      else sensorCount += 1
    }
    for (const hour of climate.hours) {
      if (!countsByRow(hour.hourStart) || hour.hourStart > to || hour.readingCount === 0) continue
      typedCount += hour.typedCount
      sensorCount += hour.readingCount - hour.typedCount
      // A neighbour at hand says the first instant better than the hour does.
      if (!touchedHours.has(hour.hourStart)) firstInWindowAt = Math.min(firstInWindowAt ?? Infinity, hour.hourStart)
    }
  }
  const newest = climateOf(relevant.at(-1))?.newest
  return {
    sensorCount,
    typedCount,
    lastBeforeStart: markOf(climateOf(relevant[0])?.exact.findLast((reading) => reading.measuredAt <= start)),
    firstInWindowAt,
    newest: markOf(newest),
  }
}
