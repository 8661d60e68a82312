import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { placeSpans } from '@/lib/drying/place-spans'
import { doseOverSpans, instantWhenDose } from '@/lib/drying/tree-dose'
import type { DryingSpan, FanHours } from '@/lib/drying/types'
import { arbitraryInstant, arbitraryReadings } from './arbitrary-readings'
import { buildCurve, buildFactor, buildSpan, hour, HOUR_MS, SEA_LEVEL_PA, START } from './build-readings'

const factors = fc.double({ min: 0.3, max: 2, noNaN: true })
const STEADY = buildCurve(Array.from({ length: 21 }, (_, index) => buildFactor(hour(index / 2), 1)))

describe('doseOverSpans', () => {
  it('is the place factor times the dose of the room', () => {
    expect(doseOverSpans([buildSpan(STEADY, 0.5)], hour(1), hour(5)).likely).toBeCloseTo(2, 12)
  })

  it('credits nothing before the first stay, between two and after the last', () => {
    const spans = [buildSpan(STEADY, 1, { from: hour(1), to: hour(2) }), buildSpan(STEADY, 1, { from: hour(4), to: hour(5) })]
    expect(doseOverSpans(spans, hour(0), hour(9)).likely).toBeCloseTo(2, 12)
    expect(doseOverSpans(spans, hour(3), hour(2))).toEqual({ likely: 0, low: 0, high: 0 })
    expect(doseOverSpans([], hour(0), hour(9))).toEqual({ likely: 0, low: 0, high: 0 })
  })

  it('is split exactly by a move', () => {
    fc.assert(
      fc.property(
        arbitraryReadings(),
        arbitraryReadings(),
        arbitraryInstant(),
        fc.integer({ min: START, max: hour(40) }),
        factors,
        factors,
        (firstRoom, secondRoom, to, movedAt, first, second) => {
          const before = buildSpan(buildCurve(firstRoom), first, { to: movedAt })
          const after = buildSpan(buildCurve(secondRoom), second, { from: movedAt })
          const moved = doseOverSpans([before, after], START, to)
          const inFirst = doseOverSpans([buildSpan(before.curve, first)], START, Math.min(to, movedAt))
          const inSecond = doseOverSpans([buildSpan(after.curve, second, { from: movedAt })], movedAt, to)
          for (const bound of ['likely', 'low', 'high'] as const) expect(moved[bound]).toBeCloseTo(inFirst[bound] + inSecond[bound], 9)
        },
      ),
    )
  })

  it('is the same when a tree is moved to the same place', () => {
    fc.assert(
      fc.property(arbitraryReadings(), fc.integer({ min: START, max: hour(40) }), factors, (readings, movedAt, factor) => {
        const curve = buildCurve(readings)
        const stays = [buildSpan(curve, factor, { to: movedAt }), buildSpan(curve, factor, { from: movedAt })]
        expect(doseOverSpans(stays, START, hour(45)).likely).toBeCloseTo(
          doseOverSpans([buildSpan(curve, factor)], START, hour(45)).likely,
          9,
        )
      }),
    )
  })

  it('does not know of time zones or of a change of the clocks, unless a timetable of fans does', () => {
    const from = Date.UTC(2026, 9, 24, 12)
    const curve = buildCurve(Array.from({ length: 97 }, (_, index) => buildFactor(from + (index * HOUR_MS) / 2, 0.7)))
    const doseIn = (timeZone: string, fanHours: FanHours[]) => {
      const place = { airSpeedFansOnMps: 1.5, airSpeedFansOffMps: 0.5, fanDuty: 1, fanHours }
      const stays = placeSpans({ from, to: from + 48 * HOUR_MS, place, overrides: [], pressurePa: SEA_LEVEL_PA, timeZone })
      return doseOverSpans(
        stays.map((stay) => Object.assign(stay, { curve })),
        from,
        from + 48 * HOUR_MS,
      ).likely
    }
    const zones = ['UTC', 'Europe/Berlin', 'America/New_York', 'Australia/Lord_Howe', 'Asia/Kolkata']
    for (const zone of zones) expect(doseIn(zone, [])).toBe(doseIn('UTC', []))
    // 25 October 2026 is a Sunday of 25 hours in Berlin.
    const allSunday = [{ weekday: 7, onMinute: 0, offMinute: 1440 }]
    expect(doseIn('Europe/Berlin', allSunday) - doseIn('Asia/Kolkata', allSunday)).toBeCloseTo(0.7 * (1.15732 - 0.79497), 4)
  })
})

describe('instantWhenDose', () => {
  it('carries what one stay leaves over to the next', () => {
    const spans = [buildSpan(STEADY, 0.5, { to: hour(2) }), buildSpan(STEADY, 2, { from: hour(2) })]
    expect(instantWhenDose(spans, hour(0), 1, 'likely')).toBe(hour(2))
    expect(instantWhenDose(spans, hour(0), 3, 'likely')).toBe(hour(3))
    expect(instantWhenDose(spans, hour(0), 100, 'likely')).toBeNull()
    expect(instantWhenDose(spans, hour(4), 0, 'likely')).toBe(hour(4))
    expect(instantWhenDose([], hour(4), 1, 'likely')).toBeNull()
  })

  it('undoes the dose across moves, on the likely dose and on its bounds', () => {
    const cuts = fc.uniqueArray(fc.integer({ min: START + 1, max: hour(30) }), { minLength: 1, maxLength: 6 })
    fc.assert(
      fc.property(
        arbitraryReadings({ minLength: 3 }),
        cuts,
        fc.array(factors, { minLength: 7, maxLength: 7 }),
        arbitraryInstant(),
        (...given) => {
          const [readings, moves, speeds, to] = given
          const curve = buildCurve(readings)
          const ends = [START, ...moves.toSorted((a, b) => a - b), Infinity]
          const spans: DryingSpan[] = ends.slice(1).map((end, index) => buildSpan(curve, speeds[index]!, { from: ends[index]!, to: end }))
          for (const bound of ['likely', 'low', 'high'] as const) {
            const dose = doseOverSpans(spans, START, to)[bound]
            const at = instantWhenDose(spans, START, dose, bound)
            expect(at).not.toBeNull()
            expect(at).toBeLessThanOrEqual(Math.max(START, to) + 1000)
            expect(Math.abs(doseOverSpans(spans, START, at!)[bound] - dose)).toBeLessThan(5e-6)
          }
        },
      ),
    )
  })
})
