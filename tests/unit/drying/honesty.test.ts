import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { callCoat, windowReadings } from '@/lib/drying/coat-call'
import { hourDoses, hourStartOf } from '@/lib/drying/dose-hours'
import { roomFactor } from '@/lib/drying/room-factor'
import { constantSegment, holdsUntil, roomSegments } from '@/lib/drying/room-segments'
import type { CoatForClock, Instant, RoomReading } from '@/lib/drying/types'
import { readTyped, typedText } from '@/lib/format/typed-units'
import { queueTree } from '@/lib/queue/assemble'
import { needsConfirmation, releaseChecks } from '@/lib/trees/release-checks'
import { buildContext, buildDerived, buildRoom, RECIPE_AIR } from '../room/build-room'
import { arbitraryReadings } from './arbitrary-readings'
import { buildCoat, buildFactor, buildSpan, hour, HOUR_MS, MINUTE_MS, SEA_LEVEL_PA, START } from './build-readings'

const DAY_MS = 24 * HOUR_MS

/** A call in 1.0 m/s air: readings up to now, then a fortnight of forecast that dries fast. */
function callAt(now: Instant, readings: readonly RoomReading[], coat: CoatForClock = buildCoat()) {
  const spans = [
    buildSpan(roomSegments(readings, { now }), 1, { to: now }),
    buildSpan([constantSegment(now, now + 14 * DAY_MS, 'forecast', 2)], 1, { from: now }),
  ]
  return callCoat({ coat, spans, now, readings: windowReadings(readings, coat.clockStartsAt, now) })
}

/** A reading every ten minutes from one instant to another, at a room factor of 1. */
const steadily = (from: Instant, to: Instant) =>
  Array.from({ length: Math.floor((to - from) / (10 * MINUTE_MS)) + 1 }, (_, index) => buildFactor(from + index * 10 * MINUTE_MS, 1))

const need = fc.double({ min: 0.05, max: 30, noNaN: true })
const days = fc.integer({ min: 1, max: 20 })

describe('a coat without a reading in its window', () => {
  it('is unknown and never dry, whatever was read before and is forecast, however long it hangs', () => {
    fc.assert(
      fc.property(arbitraryReadings(), need, fc.integer({ min: 0, max: 14 * 24 * 60 }), (readings, needReferenceHours, minutes) => {
        const lastHeld = Math.max(...readings.map(holdsUntil))
        const coat = buildCoat({ clockStartsAt: lastHeld + 1, needReferenceHours })
        const call = callAt(coat.clockStartsAt + minutes * MINUTE_MS, readings, coat)
        expect(call).toMatchObject({ isUnknown: true, isLikelyDry: false, isSafeDry: false, guardReachedAt: null, moistureRatio: 1 })
        expect(call.dose).toEqual({ likely: 0, low: 0, high: 0 })
        expect(call.likelyAt ?? Infinity).toBeGreaterThan(coat.clockStartsAt + minutes * MINUTE_MS)
      }),
      { numRuns: 200 },
    )
  })

  it('does not become dry by a forecast: readings alone make the dose', () => {
    fc.assert(
      fc.property(arbitraryReadings(), need, fc.integer({ min: START, max: hour(60) }), (readings, needReferenceHours, now) => {
        const coat = buildCoat({ needReferenceHours })
        const spans = [buildSpan(roomSegments(readings, { now }), 1)]
        const without = callCoat({ coat, spans, now, readings: windowReadings(readings, coat.clockStartsAt, now) })
        const { dose, isLikelyDry, isSafeDry, guardReachedAt, isUnknown } = callAt(now, readings, coat)
        expect({ dose, isLikelyDry, isSafeDry, guardReachedAt, isUnknown }).toEqual({
          dose: without.dose,
          isLikelyDry: without.isLikelyDry,
          isSafeDry: without.isSafeDry,
          guardReachedAt: without.guardReachedAt,
          isUnknown: without.isUnknown,
        })
      }),
      { numRuns: 200 },
    )
  })
})

describe('a sensor that falls silent', () => {
  it('makes no coat dry later than half an hour after its last reading, in days of silence', () => {
    fc.assert(
      fc.property(need, fc.integer({ min: 0, max: 600 }), fc.integer({ min: 31, max: 20 * 24 * 60 }), (needed, readFor, silentFor) => {
        const readings = steadily(START, START + readFor * MINUTE_MS)
        const newest = readings.at(-1)!.measuredAt
        const call = callAt(newest + silentFor * MINUTE_MS, readings, buildCoat({ needReferenceHours: needed }))
        expect(call.guardReachedAt ?? newest).toBeLessThanOrEqual(newest + 30 * MINUTE_MS)
        expect(call.isUnknown).toBe(call.guardReachedAt === null)
        expect(call.dose.high).toBeLessThanOrEqual((newest - START) / HOUR_MS + 0.5 + 1e-9)
      }),
      { numRuns: 200 },
    )
  })

  it('is credited at its slower end when it speaks again, at half of that for the safe time, after days as after hours', () => {
    const factor = fc.double({ min: 0.05, max: 2, noNaN: true })
    fc.assert(
      fc.property(days, factor, factor, (silentDays, before, after) => {
        const back = START + silentDays * DAY_MS
        const { dose } = callAt(back, [buildFactor(START, before), buildFactor(back, after)])
        const [low, high] = [Math.min(before, after), Math.max(before, after)]
        expect(dose.likely / (low * silentDays * 24)).toBeCloseTo(1, 9)
        expect(dose.low / (low * silentDays * 12)).toBeCloseTo(1, 9)
        expect(dose.high / (high * silentDays * 24)).toBeCloseTo(1, 9)
      }),
      { numRuns: 60 },
    )
  })

  it('leaves a gap of days in the hourly table, of the same dose, across the change of the clocks too', () => {
    // Clocks go back in London on 25 October 2026 and forward on 29 March 2026.
    const starts = fc.constantFrom(START, Date.parse('2026-10-23T13:20:00Z'), Date.parse('2026-03-27T13:20:00Z'))
    fc.assert(
      fc.property(starts, days, (start, silentDays) => {
        const back = start + silentDays * DAY_MS
        const segments = roomSegments([buildFactor(start, 1), buildFactor(back, 0.5)], { now: back })
        const hours = hourDoses(segments, hourStartOf(start), hourStartOf(back) + HOUR_MS)
        const sum = hours.reduce((total, row) => total + row.dose.likely, 0)
        const gapMinutes = hours.reduce((total, row) => total + row.gapMinutes, 0)
        expect(sum).toBeCloseTo(silentDays * 12, 6)
        expect(gapMinutes).toBeCloseTo(silentDays * 24 * 60, 6)
      }),
      { numRuns: 30 },
    )
  })
})

describe('a tree in a silent room', () => {
  const inner = { coat: 3, placeId: 'Rack' }

  it('is unknown on every screen, shows no time and may not be dipped over as dry', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 72 }), fc.double({ min: 0, max: 0.99, noNaN: true }), (silentHours, share) => {
        const context = buildContext({ climates: [buildRoom(() => RECIPE_AIR, { silentHours })] })
        // Dipped after the last reading had ceased to hold.
        const tree = buildDerived(context, { ...inner, hoursAgo: share * (silentHours - 0.55) })
        expect(tree.state).toBe('unknown')
        expect(tree.mayDip).toBe(false)
        expect(queueTree(tree, context.places)).toMatchObject({ state: 'unknown', dry: null, stateSince: null })
        expect(tree.warnings.map(({ code, text }) => ({ code, text }))).toContainEqual({
          code: 'unknown',
          text: 'No reading tells how the air was: confirm by touch, weight or temperature before the next act.',
        })
      }),
      { numRuns: 40 },
    )
  })

  it('is not dried out with its last coat on, and cannot be released', () => {
    const context = buildContext({ climates: [buildRoom(() => RECIPE_AIR, { silentHours: 60 })] })
    const tree = buildDerived(context, { coat: 5, hoursAgo: 50 })
    expect(tree.state).toBe('last coat on')
    expect(releaseChecks(tree, 'touch').find(({ code }) => code === 'dry')).toMatchObject({ isMet: false })
  })
})

describe('a coat that came dry in a damp room', () => {
  const dampText = (tree: ReturnType<typeof buildDerived>) => tree.warnings.find(({ code }) => code === 'damp room')?.text

  it.each([
    { relHumidityPct: 74, text: undefined },
    { relHumidityPct: 75, text: undefined },
    { relHumidityPct: 76, text: 'Dry by the clock, room damp (76 % RH, limit 75 %): confirm by touch, weight or temperature.' },
    { relHumidityPct: 92, text: 'Dry by the clock, room damp (92 % RH, limit 75 %): confirm by touch, weight or temperature.' },
  ])('says at $relHumidityPct %: $text', ({ relHumidityPct, text }) => {
    const context = buildContext({ climates: [buildRoom(() => ({ airTempC: 20, relHumidityPct }))] })
    const tree = buildDerived(context, { coat: 3, need: 0.5, hoursAgo: 28 })
    expect(tree.call?.guardReachedAt).not.toBeNull()
    expect(dampText(tree)).toBe(text)
    // It warns and never forbids.
    expect(tree.mayDip).toBe(true)
  })

  it('has to be confirmed before the release where it is the last one', () => {
    const room = (relHumidityPct: number) => buildContext({ climates: [buildRoom(() => ({ airTempC: 20, relHumidityPct }))] })
    const finished = (relHumidityPct: number) => buildDerived(room(relHumidityPct), { coat: 5, need: 1, hoursAgo: 28 })
    expect(needsConfirmation(finished(50))).toBe(false)
    const damp = finished(80)
    expect(needsConfirmation(damp)).toBe(true)
    expect(releaseChecks(damp, null).find(({ code }) => code === 'confirmation')).toMatchObject({ isMet: false })
    expect(releaseChecks(damp, 'weight').find(({ code }) => code === 'confirmation')).toMatchObject({ isMet: true })
  })
})

describe('the unit in which a reading is typed', () => {
  it('changes no dose', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1000, max: 3500 }), fc.integer({ min: 20, max: 99 }), (hundredths, relHumidityPct) => {
        const airTempC = hundredths / 100
        const inDegF = readTyped(Number(typedText(airTempC, 'degF')), 'degF')
        const [one, other] = [airTempC, inDegF].map((tempC) => roomFactor({ airTempC: tempC, relHumidityPct }, SEA_LEVEL_PA))
        expect(other).toBe(one)
      }),
    )
  })
})
