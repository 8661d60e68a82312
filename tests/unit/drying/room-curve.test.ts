import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { cutCurve, instantAtDose, roomDose } from '@/lib/drying/room-curve'
import { constantSegment, roomSegments } from '@/lib/drying/room-segments'
import type { Instant, RoomCurve, RoomReading } from '@/lib/drying/types'
import { arbitraryInstant, arbitraryReadings } from './arbitrary-readings'
import { buildCurve, buildFactor, hour, HOUR_MS, START } from './build-readings'

const BOUNDS = ['likely', 'low', 'high'] as const

/** Rate of a room at an instant, read off the readings by the rules, without segments or sums. */
function likelyRateByHand(readings: readonly RoomReading[], at: Instant): number {
  const left = readings.findLast((reading) => reading.measuredAt <= at)
  const right = readings.find((reading) => reading.measuredAt > at)
  if (left === undefined) return 0
  const age = at - left.measuredAt
  if (left.source === 'typed') return age <= 12 * HOUR_MS ? left.roomFactor : 0
  if (right === undefined) return age <= HOUR_MS / 2 ? left.roomFactor : 0
  const length = right.measuredAt - left.measuredAt
  if (length > HOUR_MS) return Math.min(left.roomFactor, right.roomFactor)
  return left.roomFactor + ((right.roomFactor - left.roomFactor) * age) / length
}

describe('roomDose', () => {
  it('is the area under the rate, also where it starts and ends inside a segment', () => {
    const curve = buildCurve([buildFactor(hour(0), 1), buildFactor(hour(1), 2)])
    expect(roomDose(curve, hour(0), hour(1)).likely).toBeCloseTo(1.5, 12)
    expect(roomDose(curve, hour(0.25), hour(0.75)).likely).toBeCloseTo(0.75, 12)
  })

  it('credits nothing outside the curve and in its holes', () => {
    const curve: RoomCurve = [constantSegment(hour(0), hour(1), 'measured', 1), constantSegment(hour(3), hour(4), 'measured', 1)]
    expect(roomDose(curve, -Infinity, Infinity).likely).toBeCloseTo(2, 12)
    expect(roomDose(curve, hour(1), hour(3)).likely).toBe(0)
    expect(roomDose([], hour(0), hour(1))).toEqual({ likely: 0, low: 0, high: 0 })
  })

  it('is the integral of the rules for readings, by a fine sum', () => {
    fc.assert(
      fc.property(arbitraryReadings({ minLength: 2 }), (readings) => {
        const now = readings.at(-1)!.measuredAt + HOUR_MS
        const step = 5000
        let byHand = 0
        for (let at = START; at < now; at += step) byHand += likelyRateByHand(readings, at + step / 2) * (step / HOUR_MS)
        expect(Math.abs(roomDose(roomSegments(readings, { now }), START, now).likely - byHand)).toBeLessThan(1e-6 + 1e-6 * byHand)
      }),
      { numRuns: 20 },
    )
  })

  it('adds up: from a to c is from a to b and from b to c', () => {
    fc.assert(
      fc.property(arbitraryReadings(), arbitraryInstant(), arbitraryInstant(), arbitraryInstant(), (readings, one, two, three) => {
        const curve = buildCurve(readings)
        const [a, b, c] = [
          Math.min(one, two, three),
          Math.max(Math.min(one, two), Math.min(Math.max(one, two), three)),
          Math.max(one, two, three),
        ]
        for (const bound of BOUNDS) {
          expect(roomDose(curve, a, c)[bound]).toBeCloseTo(roomDose(curve, a, b)[bound] + roomDose(curve, b, c)[bound], 9)
        }
      }),
    )
  })

  it('is nothing from an instant to itself, never falls, and lies between its bounds', () => {
    fc.assert(
      fc.property(arbitraryReadings(), arbitraryInstant(), arbitraryInstant(), fc.nat(HOUR_MS), (readings, from, to, later) => {
        const curve = buildCurve(readings)
        expect(roomDose(curve, from, from)).toEqual({ likely: 0, low: 0, high: 0 })
        const dose = roomDose(curve, from, to)
        for (const bound of BOUNDS) expect(roomDose(curve, from, to + later)[bound]).toBeGreaterThanOrEqual(dose[bound] - 1e-12)
        expect(dose.low).toBeLessThanOrEqual(dose.likely + 1e-12)
        expect(dose.likely).toBeLessThanOrEqual(dose.high + 1e-12)
      }),
    )
  })

  it('costs a search, not a walk: a hundred times the readings take less than ten times as long', () => {
    expect(timeThousandDoses(50_000)).toBeLessThan(10 * timeThousandDoses(500))
  })

  it.each([
    { name: 'an end that is not a number', work: () => roomDose([], Number.NaN, 1) },
    { name: 'segments out of order', work: () => roomDose([segment(2, 3, 1), segment(0, 1, 1)], 0, 1) },
    { name: 'segments that overlap', work: () => roomDose([segment(0, 2, 1), segment(1, 3, 1)], 0, 1) },
    { name: 'an empty segment', work: () => roomDose([segment(1, 1, 1)], 0, 1) },
    { name: 'a negative rate', work: () => roomDose([segment(0, 1, -1)], 0, 1) },
    { name: 'a rate that is not a number', work: () => roomDose([segment(0, 1, Number.NaN)], 0, 1) },
  ])('refuses $name', ({ work }) => {
    expect(work).toThrow(RangeError)
  })
})

const segment = (from: Instant, to: Instant, rate: number) => constantSegment(from, to, 'measured', rate)

/** Shortest of seven times, ms, that a thousand trees take to ask one curve for their dose. */
function timeThousandDoses(readingCount: number): number {
  const curve = buildCurve(Array.from({ length: readingCount }, (_, index) => buildFactor(START + index * 300_000, 1)))
  const length = curve.at(-1)!.to - START
  const times = Array.from({ length: 8 }, () => {
    const startedAt = performance.now()
    for (let tree = 0; tree < 1000; tree += 1) roomDose(curve, START + (tree / 1000) * length, START + length)
    return performance.now() - startedAt
  })
  return Math.min(...times)
}

describe('instantAtDose', () => {
  it('solves for the time inside a sloping segment', () => {
    // From 1 to 2 in an hour: u + u^2 / 2 = 0.75, so u = sqrt(2.5) - 1.
    const curve = buildCurve([buildFactor(hour(0), 1), buildFactor(hour(1), 2)])
    expect(instantAtDose(curve, hour(0), 0.75, 'likely')).toBe(Math.ceil(START + (Math.sqrt(2.5) - 1) * HOUR_MS))
  })

  it('stops at the end of a rate that falls to nothing', () => {
    const curve = buildCurve([buildFactor(hour(0), 1), buildFactor(hour(1), 0)])
    expect(instantAtDose(curve, hour(0), 0.5, 'likely')).toBe(hour(1))
    expect(instantAtDose(curve, hour(0), 0.5001, 'likely')).toBeNull()
  })

  it('does not cross a hole for the sake of rounding', () => {
    const curve: RoomCurve = [segment(hour(0), hour(0.1), 1), segment(hour(9), hour(10), 1)]
    expect(instantAtDose(curve, hour(0), roomDose(curve, hour(0), hour(1)).likely, 'likely')).toBe(hour(0.1))
  })

  it('is its start when nothing is needed, and null when the curve ends first', () => {
    const curve = [segment(hour(0), hour(1), 1)]
    expect(instantAtDose(curve, hour(0.5), 0, 'likely')).toBe(hour(0.5))
    expect(instantAtDose(curve, hour(0.5), 0.6, 'likely')).toBeNull()
    expect(instantAtDose([], hour(0), 1, 'likely')).toBeNull()
  })

  it('undoes the dose: it is the first instant with that dose', () => {
    fc.assert(
      fc.property(arbitraryReadings({ minLength: 3 }), arbitraryInstant(), arbitraryInstant(), (readings, from, to) => {
        const curve = buildCurve(readings)
        for (const bound of BOUNDS) {
          const dose = roomDose(curve, from, to)[bound]
          const at = instantAtDose(curve, from, dose, bound)
          expect(at).not.toBeNull()
          // A second of leave: where a rate falls to nothing, rounding of the sums is worth milliseconds.
          expect(at).toBeLessThanOrEqual(Math.max(from, to) + 1000)
          expect(Math.abs(roomDose(curve, from, at!)[bound] - dose)).toBeLessThan(2e-6)
          const hadLessBefore = roomDose(curve, from, at! - 2000)[bound] < dose
          expect(at === from || hadLessBefore).toBe(true)
        }
      }),
    )
  })

  it('is the same instant again wherever the room dries', () => {
    const factor = fc.double({ min: 0.01, max: 2.5, noNaN: true })
    fc.assert(
      fc.property(fc.array(factor, { minLength: 2, maxLength: 30 }), fc.double({ min: 0.001, max: 1, noNaN: true }), (factors, share) => {
        const curve = buildCurve(factors.map((value, index) => buildFactor(hour(index / 2), value)))
        const at = Math.round(START + share * (curve.at(-1)!.to - START))
        expect(Math.abs(instantAtDose(curve, START, roomDose(curve, START, at).likely, 'likely')! - at)).toBeLessThanOrEqual(1)
      }),
    )
  })
})

describe('cutCurve', () => {
  it('keeps the dose inside and nothing outside', () => {
    fc.assert(
      fc.property(arbitraryReadings(), arbitraryInstant(), arbitraryInstant(), (readings, one, other) => {
        const curve = buildCurve(readings)
        const [from, to] = [Math.min(one, other), Math.max(one, other)]
        const cut = cutCurve(curve, from, to)
        expect(roomDose(cut, -Infinity, Infinity).likely).toBeCloseTo(roomDose(curve, from, to).likely, 9)
        expect(roomDose(cut, from, to).high).toBeCloseTo(roomDose(curve, from, to).high, 9)
      }),
    )
  })
})
