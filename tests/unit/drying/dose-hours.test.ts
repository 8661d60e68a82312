import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { hourDoses, hourStartOf, meanRoomFactor, segmentsFromHours, spliceCurve } from '@/lib/drying/dose-hours'
import { roomDose } from '@/lib/drying/room-curve'
import { roomSegments } from '@/lib/drying/room-segments'
import type { Instant, RoomReading } from '@/lib/drying/types'
import { arbitraryReadings } from './arbitrary-readings'
import { buildCurve, buildFactor, hour, HOUR_MS, START } from './build-readings'

describe('hourDoses', () => {
  it('has one row for each whole hour, with what it rests on', () => {
    const curve = buildCurve([
      buildFactor(hour(0), 1),
      buildFactor(hour(0.5), 1),
      buildFactor(hour(2), 0.6),
      buildFactor(hour(3), 0.6, 'typed'),
      buildFactor(hour(3.25), 0.6),
    ])
    const rows = hourDoses(curve, hour(-1), hour(4))
    expect(rows).toMatchObject([
      { hourStart: hour(-1), coveredMinutes: 0, gapMinutes: 0, hasTyped: false, dose: { likely: 0, low: 0, high: 0 } },
      { hourStart: hour(0), coveredMinutes: 60, gapMinutes: 30, hasTyped: false },
      { hourStart: hour(1), coveredMinutes: 60, gapMinutes: 60, hasTyped: false },
      { hourStart: hour(2), coveredMinutes: 60, gapMinutes: 0, hasTyped: true },
      { hourStart: hour(3), coveredMinutes: 15, gapMinutes: 0, hasTyped: true },
    ])
    expect(rows[1]!.dose.likely).toBeCloseTo(0.5 + 0.5 * 0.6, 12)
    expect(rows[1]!.dose.low).toBeCloseTo(0.5 + 0.5 * 0.3, 12)
    expect(rows[1]!.dose.high).toBeCloseTo(1, 12)
    expect(rows.map(meanRoomFactor)).toEqual([null, null, null, expect.closeTo(0.6, 12), null])
  })

  it.each([
    [START + 1, START + HOUR_MS],
    [START, START + 1],
    [Number.NaN, START],
  ])('refuses ends that are not whole hours', (from, to) => {
    expect(() => hourDoses([], from, to)).toThrow(RangeError)
  })

  it('sums to the dose of the readings over whole hours', () => {
    fc.assert(
      fc.property(arbitraryReadings(), fc.integer({ min: 0, max: 40 }), fc.integer({ min: 0, max: 40 }), (readings, first, length) => {
        const curve = buildCurve(readings)
        const coarse = segmentsFromHours(hourDoses(curve, START, hour(90)))
        for (const bound of ['likely', 'low', 'high'] as const) {
          expect(roomDose(coarse, hour(first), hour(first + length))[bound]).toBeCloseTo(
            roomDose(curve, hour(first), hour(first + length))[bound],
            9,
          )
        }
      }),
    )
  })

  it('is not changed by a late reading outside the hours from the reading before it to the one after it', () => {
    fc.assert(
      fc.property(arbitraryReadings({ minLength: 3 }), fc.nat(), (readings, pick) => {
        const now = readings.at(-1)!.measuredAt
        const late = 1 + (pick % (readings.length - 2))
        const rowsOf = (some: RoomReading[]) => hourDoses(roomSegments(some, { now }), START, hourStartOf(now) + HOUR_MS)
        const without = rowsOf(readings.toSpliced(late, 1))
        for (const [index, row] of rowsOf(readings).entries()) {
          const isTouched = row.hourStart + HOUR_MS > readings[late - 1]!.measuredAt && row.hourStart < readings[late + 1]!.measuredAt
          if (isTouched) continue
          expect(row.dose.likely).toBeCloseTo(without[index]!.dose.likely, 9)
          expect(row).toMatchObject({ coveredMinutes: without[index]!.coveredMinutes, gapMinutes: without[index]!.gapMinutes })
        }
      }),
    )
  })
})

/** The readings of an hour, with the one before it and the one after it. */
function around(readings: readonly RoomReading[], hourStart: Instant): RoomReading[] {
  const before = readings.findLast((reading) => reading.measuredAt < hourStart)
  const after = readings.find((reading) => reading.measuredAt >= hourStart + HOUR_MS)
  const inside = readings.filter(({ measuredAt }) => measuredAt >= hourStart && measuredAt < hourStart + HOUR_MS)
  return [before, ...inside, after].filter((reading) => reading !== undefined)
}

describe('spliceCurve', () => {
  it('gives the dose of all readings between instants of refined hours', () => {
    const instant = fc.integer({ min: START, max: START + 40 * HOUR_MS })
    fc.assert(
      fc.property(arbitraryReadings({ minLength: 2 }), instant, instant, (readings, one, other) => {
        const [from, to] = [Math.min(one, other), Math.max(one, other)]
        const now = readings.at(-1)!.measuredAt + HOUR_MS / 4
        const all = roomSegments(readings, { now })
        const coarse = segmentsFromHours(hourDoses(all, START, hour(90)))
        const refined = [...new Set([hourStartOf(from), hourStartOf(to)])].map((start) => ({ from: start, to: start + HOUR_MS }))
        const spliced = refined.reduce(
          (curve, range) => spliceCurve(curve, roomSegments(around(readings, range.from), { now }), [range]),
          coarse,
        )
        for (const bound of ['likely', 'low', 'high'] as const) {
          expect(roomDose(spliced, from, to)[bound]).toBeCloseTo(roomDose(all, from, to)[bound], 9)
        }
        const atOnce = spliceCurve(coarse, all, refined.toReversed())
        expect(roomDose(atOnce, from, to).likely).toBeCloseTo(roomDose(all, from, to).likely, 9)
      }),
    )
  })

  it('is wrong inside an hour that is not refined, which is why end hours are', () => {
    const all = buildCurve([buildFactor(hour(0), 0), buildFactor(hour(1), 2)])
    const coarse = segmentsFromHours(hourDoses(all, hour(0), hour(1)))
    expect(roomDose(coarse, hour(0), hour(0.5)).likely).toBeCloseTo(0.5, 9)
    expect(roomDose(all, hour(0), hour(0.5)).likely).toBeCloseTo(0.25, 9)
  })
})
