import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { callCoat, windowReadings } from '@/lib/drying/coat-call'
import { coatPhase } from '@/lib/drying/coat-phase'
import { constantSegment, roomSegments } from '@/lib/drying/room-segments'
import type { CoatForClock, Instant, RoomReading } from '@/lib/drying/types'
import { arbitraryReadings } from './arbitrary-readings'
import { buildCoat, buildFactor, buildSpan, hour, HOUR_MS, MINUTE_MS, START } from './build-readings'

/** A call at a place factor of 1: readings up to now, then three days of forecast. */
function callAt(now: Instant, readings: readonly RoomReading[], coat: CoatForClock = buildCoat(), forecastFactor = 1) {
  const spans = [
    buildSpan(roomSegments(readings, { now }), 1, { to: now }),
    buildSpan([constantSegment(now, now + 72 * HOUR_MS, 'forecast', forecastFactor)], 1, { from: now }),
  ]
  return callCoat({ coat, spans, now, readings: windowReadings(readings, coat.clockStartsAt, now) })
}

/** Sensor readings every half hour, from one hour to another, at a room factor of 1. */
const everyHalfHour = (from: number, to: number) =>
  Array.from({ length: (to - from) * 2 + 1 }, (_, index) => buildFactor(hour(from + index / 2), 1))

describe('callCoat on a coat that needs four hours', () => {
  it('promises the three times before any of them', () => {
    const call = callAt(hour(1), everyHalfHour(-1, 1))
    expect(call.dose.likely).toBeCloseTo(1, 9)
    expect(call.need).toEqual({ likely: 4, low: expect.closeTo(4 * 0.7259, 3), high: expect.closeTo(4 * 1.3777, 3) })
    expect(call.earliestAt).toBe(Math.ceil(START + call.need.low * HOUR_MS))
    expect(call.likelyAt).toBe(hour(4))
    expect(call.safeAt).toBe(Math.ceil(START + call.need.high * HOUR_MS))
    expect(call).toMatchObject({ guardReachedAt: null, isLikelyDry: false, isSafeDry: false, isUnknown: false, sigma: 0.25 })
  })

  it('lets a likely guard go at the likely time and a safe one at the safe time', () => {
    const readings = everyHalfHour(-1, 6)
    expect(callAt(hour(4) - 1, readings).guardReachedAt).toBeNull()
    expect(callAt(hour(4), readings).guardReachedAt).toBe(hour(4))
    expect(callAt(hour(4), readings, buildCoat({ guard: 'safe' }))).toMatchObject({ guardReachedAt: null, isLikelyDry: true })
    const late = callAt(hour(6), readings, buildCoat({ guard: 'safe' }))
    expect(late).toMatchObject({ isSafeDry: true, guardReachedAt: late.safeAt })
  })

  it('widens the band of a rough time by its half width on both sides', () => {
    const sharp = callAt(hour(1), everyHalfHour(-1, 1))
    const rough = callAt(hour(1), everyHalfHour(-1, 1), buildCoat({ roughMinutes: 10 }))
    expect(rough.earliestAt).toBe(sharp.earliestAt! - 10 * MINUTE_MS)
    expect(rough.likelyAt).toBe(sharp.likelyAt)
    expect(rough.safeAt).toBe(sharp.safeAt! + 10 * MINUTE_MS)
  })

  it('has a wider band with a recess, and a narrower one with evidence', () => {
    expect(callAt(hour(1), everyHalfHour(-1, 1), buildCoat({ recessClass: 'closed core' })).sigma).toBeCloseTo(0.269, 3)
    expect(callAt(hour(1), everyHalfHour(-1, 1), buildCoat({ baseSigma: 0.07 })).sigma).toBe(0.07)
  })

  it('has no time beyond the horizon of the forecast', () => {
    expect(callAt(hour(1), everyHalfHour(-1, 1), buildCoat(), 0)).toMatchObject({ earliestAt: null, likelyAt: null, safeAt: null })
  })

  it('has taken nothing yet when its clock starts in a moment', () => {
    const call = callAt(START - MINUTE_MS, everyHalfHour(-1, 0))
    expect(call).toMatchObject({ dose: { likely: 0 }, moistureRatio: 1, isUnknown: false })
    expect(call.likelyAt).toBe(hour(4))
  })
})

describe('callCoat over a gap', () => {
  // From 1.0 to 0.5 in six hours: 0.5 is credited, between 0.25 and 1.0.
  const readings = [buildFactor(hour(0), 1), buildFactor(hour(6), 0.5)]
  const call = callAt(hour(6), readings, buildCoat({ needReferenceHours: 3 }))

  it('takes the likely time from the lower end, the earliest from the higher one', () => {
    expect(call.dose).toEqual({ likely: expect.closeTo(3, 9), low: expect.closeTo(1.5, 9), high: expect.closeTo(6, 9) })
    expect(call.likelyAt).toBe(hour(6))
    expect(call.earliestAt).toBe(Math.ceil(START + call.need.low * HOUR_MS))
  })

  it('takes the safe time from half of the lower end, then from the forecast', () => {
    expect(call.safeAt).toBe(Math.ceil(hour(6) + (call.need.high - 1.5) * HOUR_MS))
  })
})

describe('callCoat without enough readings', () => {
  it('is unknown, never dry, with no reading in its window', () => {
    const call = callAt(hour(40), everyHalfHour(-5, -1))
    expect(call).toMatchObject({ isUnknown: true, isLikelyDry: false, isSafeDry: false, guardReachedAt: null, moistureRatio: 1 })
    expect(call.likelyAt).toBe(hour(44))
    expect(callAt(hour(40), [])).toMatchObject({ isUnknown: true, isLikelyDry: false })
  })

  it.each([
    { name: 'a sensor reading 30 min before the dip', beforeMinutes: 30, source: 'sensor' as const, credited: 1 },
    { name: 'a sensor reading 31 min before the dip', beforeMinutes: 31, source: 'sensor' as const, credited: 0.75 },
    { name: 'a typed reading 12 h before the dip', beforeMinutes: 720, source: 'typed' as const, credited: 1 },
    { name: 'a typed reading 12 h and 1 min before the dip', beforeMinutes: 721, source: 'typed' as const, credited: 0.75 },
  ])('credits the quarter of an hour before the first reading only with $name at most', ({ beforeMinutes, source, credited }) => {
    const readings = [buildFactor(START - beforeMinutes * MINUTE_MS, 1, source), ...everyHalfHour(0.25, 1.25)]
    const dose = callAt(hour(1), readings).dose.likely
    // A typed reading of 12 h before runs out at the dip: it counts, but credits nothing after it.
    expect(dose).toBeCloseTo(source === 'typed' ? 0.75 : credited, 6)
  })

  it.each([
    { minutes: 30, source: 'sensor' as const, isUnknown: false },
    { minutes: 31, source: 'sensor' as const, isUnknown: true },
    { minutes: 719, source: 'typed' as const, isUnknown: false },
    { minutes: 721, source: 'typed' as const, isUnknown: true },
  ])('is unknown: $isUnknown, with the newest $source reading $minutes min old', ({ minutes, source, isUnknown }) => {
    const coat = buildCoat({ needReferenceHours: 100 })
    expect(callAt(START + minutes * MINUTE_MS, [buildFactor(START, 1, source)], coat).isUnknown).toBe(isUnknown)
  })

  it('stays dry when the sensor dies after the guard, and is unknown when it dies before the safe time it waits for', () => {
    const readings = everyHalfHour(-1, 5)
    expect(callAt(hour(9), readings)).toMatchObject({ isUnknown: false, guardReachedAt: hour(4) })
    expect(callAt(hour(9), readings, buildCoat({ guard: 'safe' }))).toMatchObject({ isUnknown: true, guardReachedAt: null })
  })

  it('does not let the forecast make a coat dry', () => {
    const call = callAt(hour(9), everyHalfHour(-1, 2), buildCoat(), 100)
    expect(call.dose.likely).toBeCloseTo(2.5, 9)
    expect(call).toMatchObject({ isLikelyDry: false, guardReachedAt: null, isUnknown: true })
    expect(call.likelyAt).toBeGreaterThan(hour(9))
  })
})

describe('callCoat on typed readings', () => {
  const one = [buildFactor(hour(-0.1), 1, 'typed')]
  const two = [...one, buildFactor(hour(3), 1, 'typed')]

  it('has a spread of 0.35 as soon as one of them is typed', () => {
    expect(callAt(hour(1), one).sigma).toBeCloseTo(0.35, 12)
    expect(callAt(hour(1), [...one, ...everyHalfHour(0.5, 1)]).sigma).toBeCloseTo(0.35, 12)
  })

  it('stops at likely, confirm, with one typed reading alone', () => {
    const call = callAt(hour(11), one, buildCoat({ guard: 'safe' }))
    expect(call).toMatchObject({ needsConfirmation: true, isLikelyDry: true, isSafeDry: false, safeAt: null, guardReachedAt: null })
    expect(callAt(hour(11), one)).toMatchObject({ needsConfirmation: true, guardReachedAt: hour(4) })
  })

  it('still says when it would be safe, before that time', () => {
    expect(callAt(hour(1), one).safeAt).toBe(Math.ceil(START + 4 * Math.exp(1.2815515655446004 * 0.35) * HOUR_MS))
  })

  it.each([
    { name: 'a second typed one', readings: two },
    { name: 'a sensor reading', readings: [...one, buildFactor(hour(3), 1)] },
  ])('can be safe with $name', ({ readings }) => {
    const now = hour(3) + 12 * HOUR_MS
    const more = readings.at(-1)!.source === 'sensor' ? everyHalfHour(3.5, 10) : []
    expect(callAt(now, [...readings, ...more], buildCoat({ guard: 'safe' }))).toMatchObject({ needsConfirmation: false, isSafeDry: true })
  })

  it('does not take one reading that arrives twice for two', () => {
    expect(callAt(hour(11), [...one, ...one]).needsConfirmation).toBe(true)
  })
})

describe('callCoat on any readings', () => {
  it('has the earliest time before the likely one before the safe one, and all of them by their readings', () => {
    const coats = fc
      .record({
        needReferenceHours: fc.double({ min: 0.2, max: 30, noNaN: true }),
        roughMinutes: fc.integer({ min: 0, max: 60 }),
        guard: fc.constantFrom('likely' as const, 'safe' as const),
        clockStartsAt: fc.integer({ min: START, max: hour(20) }),
      })
      .map(buildCoat)
    const now = fc.integer({ min: START, max: hour(48) })
    fc.assert(
      fc.property(arbitraryReadings(), coats, now, fc.double({ min: 0, max: 2, noNaN: true }), (readings, coat, at, factor) => {
        const call = callAt(at, readings, coat, factor)
        const never = Infinity
        expect(call.earliestAt ?? never).toBeLessThanOrEqual(call.likelyAt ?? never)
        expect(call.likelyAt ?? never).toBeLessThanOrEqual(call.safeAt ?? never)
        expect(call.isLikelyDry).toBe((call.likelyAt ?? never) <= at)
        expect(call.isSafeDry).toBe((call.safeAt ?? never) <= at)
        expect(call.isLikelyDry && call.dose.likely < call.need.likely - 1e-6).toBe(false)
        expect(call.isUnknown && call.guardReachedAt !== null).toBe(false)
        const isWithout = readings.every(({ measuredAt }) => measuredAt > at || measuredAt < coat.clockStartsAt - 12 * HOUR_MS)
        expect(isWithout && (call.isLikelyDry || call.isSafeDry || !call.isUnknown)).toBe(false)
        expect(coatPhase(call, at) === 'dry').toBe(call.guardReachedAt !== null)
      }),
      { numRuns: 300 },
    )
  })

  it('gives the same call whatever the order in which readings arrive', () => {
    fc.assert(
      fc.property(arbitraryReadings(), fc.integer({ min: START, max: hour(48) }), (readings, at) => {
        expect(callAt(at, [...readings.toReversed(), ...readings])).toEqual(callAt(at, readings))
      }),
    )
  })
})

describe('coatPhase', () => {
  it.each([
    { hours: 0.5, phase: 'wet' },
    { hours: 2.02, phase: 'drying' }, // moisture ratio 0.34
    { hours: 1.3, phase: 'wet' }, // 0.506
    { hours: 1.4, phase: 'drying' }, // 0.478
    { hours: 3.45, phase: 'drying' },
    { hours: 3.5, phase: 'nearly dry' },
    { hours: 4, phase: 'dry' },
  ])('is $phase after $hours of four hours', ({ hours, phase }) => {
    const now = hour(hours)
    expect(coatPhase(callAt(now, [...everyHalfHour(-1, 3), buildFactor(hour(3.4), 1), buildFactor(hour(4), 1)]), now)).toBe(phase)
  })

  it('is nearly dry from the likely time to the safe one, where the guard is safe', () => {
    expect(coatPhase(callAt(hour(4.5), everyHalfHour(-1, 4.5), buildCoat({ guard: 'safe' })), hour(4.5))).toBe('nearly dry')
  })

  it('is unknown without readings', () => {
    expect(coatPhase(callAt(hour(20), []), hour(20))).toBe('unknown')
  })
})
