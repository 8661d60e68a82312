import { millisecondsInHour } from 'date-fns/constants'
import type { RecessClass } from '@/lib/coats/vocabulary'
import { hourStartOf } from '@/lib/drying/dose-hours'
import { fanOverrides, isOnByTimetable, nextTimetableSwitch } from '@/lib/drying/fan-timetable'
import { placeSpans, type PlaceSpan } from '@/lib/drying/place-spans'
import type { DryingSpan, FanSwitch, PlaceAir, ReadingMark, RoomReading, WindowReadings } from '@/lib/drying/types'
import { HORIZON_HOURS, readingsForFlags, type AirStretch, type RoomClimate } from '@/lib/room/climate'
import type { Shift } from '@/lib/schedule/shifts'
import type { PlaceFacts } from '@/lib/trees/facts'

/** Everything about the room that trees share: made once a pass. */
export type FloorContext = {
  now: number
  timeZone: string
  pressurePa: number
  /** How much slower each class of recess dries than an outside. */
  recessFactors: Readonly<Record<RecessClass, number>>
  climates: ReadonlyMap<number, RoomClimate>
  places: ReadonlyMap<string, PlaceFacts>
  /** Fan-on and fan-off stretches of each place, by the air it had at the time, from the oldest hour in use to the horizon. */
  placeSpans: ReadonlyMap<string, readonly PlaceSpan[]>
  /** How the fans of each place stand now. */
  fans: ReadonlyMap<string, FansNow>
  /** Shifts from now on. */
  shifts: readonly Shift[]
}

/** The fans of a place at one moment. */
export type FansNow = {
  isOn: boolean
  /** When that changes, or the timetable has them again; null: not before somebody says so. */
  until: number | null
  /** Since when a person's word stands in place of the timetable; null where none does. */
  saidAt: number | null
}

type ContextInput = Omit<FloorContext, 'placeSpans' | 'fans' | 'climates' | 'places'> & {
  climates: readonly RoomClimate[]
  places: readonly PlaceFacts[]
  /** What people said of the fans of each place since `from`, in order, with the last word before it. */
  fanSwitches: ReadonlyMap<string, readonly FanSwitch[]>
  /** Oldest instant that any tree's clock needs. */
  from: number
}

/** Makes the context that every tree of one pass is assessed in. */
export function floorContext({ climates, places, fanSwitches, from, ...rest }: ContextInput): FloorContext {
  const to = rest.now + HORIZON_HOURS * millisecondsInHour
  const { now, timeZone, pressurePa } = rest
  const spansOf = (place: PlaceFacts) => {
    const switches = fanSwitches.get(place.id) ?? []
    const overrides = fanOverrides(switches, timetablesOf(place, switches[0]?.at ?? from), timeZone)
    return airsOf(place, from, to).flatMap(({ air, ...ends }) => placeSpans({ ...ends, place: air, overrides, pressurePa, timeZone }))
  }
  return {
    ...rest,
    climates: bySensor(climates),
    places: new Map(places.map((place) => [place.id, place])),
    placeSpans: new Map(places.map((place) => [place.id, spansOf(place)])),
    fans: new Map(places.map((place) => [place.id, fansAt(place, fanSwitches.get(place.id) ?? [], now, timeZone)])),
  }
}

/** The same pass with other climates; places and shifts stand. */
export const withClimates = (context: FloorContext, climates: readonly RoomClimate[]): FloorContext => ({
  ...context,
  climates: bySensor(climates),
})

const bySensor = (climates: readonly RoomClimate[]) => new Map(climates.map((climate) => [climate.sensorId, climate]))

/** The air of a place as it was over a stretch of time, split where it was changed. */
function airsOf(place: PlaceFacts, from: number, to: number): { air: PlaceAir & { sensorId: number }; from: number; to: number }[] {
  const changes = place.formerAirs.map(({ until }) => until).filter((until) => until > from && until < to)
  const starts = [from, ...changes]
  return starts.map((start, index) => ({ air: airOf(place, start), from: start, to: starts[index + 1] ?? to }))
}

/** The air of a place, and the sensor that read it, as they were at an instant. */
export function airOf(place: PlaceFacts, at: number): PlaceAir & { sensorId: number } {
  return place.formerAirs.find(({ until }) => at < until) ?? place
}

const timetablesOf = (place: PlaceFacts, from: number) =>
  airsOf(place, from, Infinity).map(({ air, ...ends }) => ({ ...ends, fanHours: air.fanHours }))

/** How the fans of a place stand at a moment, by what people said and else by the timetable. */
export function fansAt(place: PlaceFacts, switches: readonly FanSwitch[], at: number, timeZone: string): FansNow {
  const timetables = timetablesOf(place, Math.min(at, switches[0]?.at ?? at))
  const said = fanOverrides(switches, timetables, timeZone).find(({ from, to }) => from <= at && at < to)
  if (said) return { isOn: said.isOn, until: said.to === Infinity ? null : said.to, saidAt: said.from }
  return { isOn: isOnByTimetable(timetables, at, timeZone), until: nextTimetableSwitch(timetables, at, timeZone), saidAt: null }
}

type Stay = { placeId: string; since: number }

/** Part of a stay with one sensor; null where the place is not known. */
type SensedStay = Stay & { sensorId: number | null }

/** Stays that matter from an instant on, the first one cut to begin there, split where another sensor took over. */
function staysFrom({ places }: FloorContext, stays: readonly Stay[], from: number): SensedStay[] {
  const current = stays.findLast((stay) => stay.since <= from) ?? stays[0]
  if (!current) return []
  const relevant = [{ ...current, since: from }, ...stays.filter((stay) => stay.since > from)]
  return relevant.flatMap((stay, index): SensedStay[] => {
    const place = places.get(stay.placeId)
    if (!place) return [{ ...stay, sensorId: null }]
    const airs = airsOf(place, stay.since, relevant[index + 1]?.since ?? Infinity)
    return airs
      .filter(({ air }, at) => air.sensorId !== airs[at - 1]?.air.sensorId)
      .map((part) => ({ placeId: stay.placeId, since: part.from, sensorId: part.air.sensorId }))
  })
}

const climateOf = ({ climates }: FloorContext, stay: SensedStay | undefined): RoomClimate | undefined =>
  stay?.sensorId == null ? undefined : climates.get(stay.sensorId)

/** A tree's spans from an instant to the horizon: split at every move and at every switch of the fans. */
export function dryingSpans(context: FloorContext, stays: readonly Stay[], from: number): DryingSpan[] {
  const relevant = staysFrom(context, stays, from)
  return relevant.flatMap((stay, index) => {
    const climate = climateOf(context, stay)
    if (!climate) return []
    const end = relevant[index + 1]?.since ?? Infinity
    return (context.placeSpans.get(stay.placeId) ?? [])
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
  const relevant = staysFrom(context, stays, from).filter((stay) => stay.since <= to)
  return relevant.flatMap((stay, index) => {
    const climate = climateOf(context, stay)
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
  const relevant = staysFrom(context, stays, start).filter((stay) => stay.since <= Math.max(at, start))
  let sensorCount = 0
  let typedCount = 0
  let firstInWindowAt: number | null = null
  for (const [index, stay] of relevant.entries()) {
    const climate = climateOf(context, stay)
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
  const newest = climateOf(context, relevant.at(-1))?.newest
  return {
    sensorCount,
    typedCount,
    lastBeforeStart: markOf(climateOf(context, relevant[0])?.exact.findLast((reading) => reading.measuredAt <= start)),
    firstInWindowAt,
    newest: markOf(newest),
  }
}
