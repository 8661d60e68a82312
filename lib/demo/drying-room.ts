import { millisecondsInHour, millisecondsInMinute } from 'date-fns/constants'
import { DEMO_AIRS, demoAirAt, type DemoAir, type DemoClimate } from '@/lib/demo/climate'
import { DEMO_PLACE_KEYS, DEMO_PLACES, type DemoPlace } from '@/lib/demo/shop'
import { stationPressurePa } from '@/lib/drying/air'
import { dampAirSigma } from '@/lib/drying/need'
import { placeSpans } from '@/lib/drying/place-spans'
import { roomFactor } from '@/lib/drying/room-factor'
import { roomSegments } from '@/lib/drying/room-segments'
import { NO_DOSE, roomDose } from '@/lib/drying/room-curve'
import { instantWhenDose } from '@/lib/drying/tree-dose'
import type { Air, Dose, DryingSpan } from '@/lib/drying/types'

export const READING_EVERY_MS = 5 * millisecondsInMinute
/** How far past the start the planning looks, by the air that the feed will send. */
const LOOK_AHEAD_MS = 45 * millisecondsInMinute

/** The net loft's logger lost its network for a night and kept nothing. */
const GAP = { air: 'net loft', startsBeforeNowMs: 103.4 * millisecondsInHour, lengthMs: 3.2 * millisecondsInHour } as const

export type DemoReading = Air & { measuredAt: number }

/** Readings of one air on the five-minute grid in [from, to], but for the one gap before `now`. */
export function demoReadings(
  climate: DemoClimate,
  air: DemoAir,
  { from, to, now }: { from: number; to: number; now: number },
): DemoReading[] {
  const gapFrom = now - GAP.startsBeforeNowMs
  const readings: DemoReading[] = []
  for (let at = Math.ceil(from / READING_EVERY_MS) * READING_EVERY_MS; at <= to; at += READING_EVERY_MS) {
    const isMissing = air === GAP.air && at > gapFrom && at < gapFrom + GAP.lengthMs
    if (!isMissing) readings.push({ measuredAt: at, ...demoAirAt(climate, air, at) })
  }
  return readings
}

/** The drying clock over the demo's air, by place; the boat shed, where nobody measures, is not in it. */
export type DryingRoom = {
  doseBetween: (place: DemoPlace, from: number, to: number) => Dose
  /** Null when the dose is not reached within the time that the room knows. */
  whenDose: (place: DemoPlace, from: number, amount: number, bound: keyof Dose) => number | null
  /** What the damp air at a place adds to the spread of a need, from one instant to another. */
  airSigma: (place: DemoPlace, from: number, to: number) => number
}

/** Works the drying clock over the history and the next three quarters of an hour. */
export function dryingRoom(climate: DemoClimate, { from, now, altitudeM }: { from: number; now: number; altitudeM: number }): DryingRoom {
  const to = now + LOOK_AHEAD_MS
  const pressurePa = stationPressurePa(altitudeM)
  const readingsOf = new Map(DEMO_AIRS.map((air) => [air, demoReadings(climate, air, { from, to, now })]))
  const meanOf = new Map([...readingsOf].map(([air, readings]) => [air, meanHumidity(readings)]))
  const curves = new Map(
    DEMO_AIRS.map((air) => {
      const readings = readingsOf.get(air) ?? []
      const known = readings.map((reading) => ({ ...reading, roomFactor: roomFactor(reading, pressurePa), source: 'sensor' as const }))
      return [air, roomSegments(known, { now: to })]
    }),
  )
  const spansOf = new Map<DemoPlace, DryingSpan[]>()
  for (const key of DEMO_PLACE_KEYS) {
    const place = DEMO_PLACES[key]
    const curve = place.air === null ? undefined : curves.get(place.air)
    if (!curve) continue
    const spans = placeSpans({ from, to, place, overrides: [], pressurePa, timeZone: climate.timeZone })
    spansOf.set(
      key,
      spans.map((span) => ({ ...span, curve })),
    )
  }
  const sumsOf = new Map([...spansOf].map(([key, spans]) => [key, runningDose(spans)]))
  return {
    doseBetween: (place, start, end) => {
      const sumUpTo = sumsOf.get(place)
      return sumUpTo && end > start ? addDose(sumUpTo(end), sumUpTo(start), -1) : NO_DOSE
    },
    whenDose: (place, start, amount, bound) => instantWhenDose(spansOf.get(place) ?? [], start, amount, bound),
    airSigma: (place, start, end) => {
      const { air } = DEMO_PLACES[place]
      const mean = air === null ? null : meanOf.get(air)?.(start, end)
      return mean == null ? 0 : dampAirSigma(mean)
    },
  }
}

/** Mean humidity of the readings from one instant to another, by their running sum; null where there is none. */
function meanHumidity(readings: readonly DemoReading[]): (from: number, to: number) => number | null {
  const sums = [0]
  for (const { relHumidityPct } of readings) sums.push(sums.at(-1)! + relHumidityPct)
  const countBefore = (at: number) => {
    let [low, high] = [0, readings.length]
    while (low < high) {
      const middle = (low + high) >>> 1
      if (readings[middle]!.measuredAt < at) low = middle + 1
      else high = middle
    }
    return low
  }
  return (from, to) => {
    const [first, end] = [countBefore(from), countBefore(to + 1)]
    return end > first ? (sums[end]! - sums[first]!) / (end - first) : null
  }
}

/** Dose from the start of some touching spans up to an instant. Planning asks for the same instants again for every shape of a tree. */
function runningDose(spans: readonly DryingSpan[]): (at: number) => Dose {
  const sums = [NO_DOSE]
  for (const span of spans) sums.push(addDose(sums.at(-1) ?? NO_DOSE, roomDose(span.curve, span.from, span.to), span.placeFactor))
  const known = new Map<number, Dose>()
  return (at) => {
    const remembered = known.get(at)
    if (remembered) return remembered
    const index = spans.findLastIndex((span) => span.from <= at)
    const span = spans[index]
    const before = sums[index] ?? NO_DOSE
    const sum = span ? addDose(before, roomDose(span.curve, span.from, Math.min(at, span.to)), span.placeFactor) : NO_DOSE
    known.set(at, sum)
    return sum
  }
}

const addDose = (sum: Dose, dose: Dose, weight: number): Dose => ({
  likely: sum.likely + weight * dose.likely,
  low: sum.low + weight * dose.low,
  high: sum.high + weight * dose.high,
})
