import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { roomDose } from '@/lib/drying/room-curve'
import { roomSegments } from '@/lib/drying/room-segments'
import { arbitraryReadings } from './arbitrary-readings'
import { buildFactor, hour, MINUTE_MS, START } from './build-readings'

const steady = (rate: number) => ({ start: rate, end: rate })

describe('roomSegments', () => {
  it('draws a straight line between sensor readings up to 60 min apart', () => {
    const rate = { start: 1, end: 0.5 }
    expect(roomSegments([buildFactor(hour(0), 1), buildFactor(hour(1), 0.5)], { now: hour(1) })).toEqual([
      { from: hour(0), to: hour(1), kind: 'measured', likely: rate, low: rate, high: rate },
    ])
  })

  it('sees a gap in a longer interval: the lower end, half of it, the higher end', () => {
    const to = hour(1) + 1
    expect(roomSegments([buildFactor(hour(0), 1), buildFactor(to, 0.6)], { now: to })).toEqual([
      { from: hour(0), to, kind: 'gap', likely: steady(0.6), low: steady(0.3), high: steady(1) },
    ])
  })

  it.each([
    { minutes: 12, heldMinutes: 12 },
    { minutes: 30, heldMinutes: 30 },
    { minutes: 45, heldMinutes: 30 },
  ])('believes the newest sensor reading for $heldMinutes of the $minutes min since', ({ minutes, heldMinutes }) => {
    const [segment, ...rest] = roomSegments([buildFactor(START, 0.8)], { now: START + minutes * MINUTE_MS })
    expect(segment).toMatchObject({ kind: 'held', from: START, to: START + heldMinutes * MINUTE_MS, likely: steady(0.8) })
    expect(rest).toEqual([])
  })

  it('holds a typed reading at its own rate until the next one, 12 h at most', () => {
    const readings = [buildFactor(hour(0), 1, 'typed'), buildFactor(hour(5), 0.5, 'typed')]
    expect(roomSegments(readings, { now: hour(30) })).toMatchObject([
      { kind: 'typed', from: hour(0), to: hour(5), likely: steady(1), low: steady(1), high: steady(1) },
      { kind: 'typed', from: hour(5), to: hour(17), likely: steady(0.5) },
    ])
  })

  it('credits nothing after a typed reading has run out, until the next one', () => {
    const segments = roomSegments([buildFactor(hour(0), 1, 'typed'), buildFactor(hour(20), 1, 'typed')], { now: hour(20) })
    expect(segments).toMatchObject([{ from: hour(0), to: hour(12) }])
    expect(roomDose(segments, hour(12), hour(20))).toEqual({ likely: 0, low: 0, high: 0 })
  })

  it('runs from a sensor reading to a typed one by the same rules, and says that a typed one is part of it', () => {
    expect(roomSegments([buildFactor(hour(0), 1), buildFactor(hour(0.5), 0.5, 'typed')], { now: hour(0.5) })).toMatchObject([
      { kind: 'typed', likely: { start: 1, end: 0.5 } },
    ])
    expect(roomSegments([buildFactor(hour(0), 1), buildFactor(hour(3), 0.5, 'typed')], { now: hour(3) })).toMatchObject([{ kind: 'gap' }])
  })

  it('does not count a reading before its time', () => {
    expect(roomSegments([buildFactor(hour(0), 1), buildFactor(hour(0.2), 2)], { now: hour(0.1) })).toMatchObject([
      { kind: 'held', to: hour(0.1), likely: steady(1) },
    ])
  })

  it('prefers the sensor, then the slower reading, of two at one instant', () => {
    const readings = [buildFactor(START, 0.3, 'typed'), buildFactor(START, 0.9), buildFactor(START, 0.7)]
    for (const order of [readings, readings.toReversed()]) {
      expect(roomSegments(order, { now: hour(0.1) })).toMatchObject([{ kind: 'held', likely: steady(0.7) }])
    }
  })

  it('is empty without readings', () => {
    expect(roomSegments([], { now: START })).toEqual([])
  })

  it('does not mind the order of arrival, nor a reading that arrives twice', () => {
    fc.assert(
      fc.property(
        arbitraryReadings().chain((readings) =>
          fc.record({
            readings: fc.constant(readings),
            arrived: fc.shuffledSubarray([...readings, ...readings], { minLength: readings.length * 2 }),
          }),
        ),
        fc.integer({ min: 0, max: 3000 }),
        ({ readings, arrived }, minutes) => {
          const now = START + minutes * MINUTE_MS
          expect(roomSegments(arrived, { now })).toEqual(roomSegments(readings, { now }))
        },
      ),
    )
  })

  it('does not change its input', () => {
    const readings = Object.freeze([buildFactor(hour(1), 1), buildFactor(hour(0), 1)])
    expect(roomSegments(readings, { now: hour(1) })).toHaveLength(1)
  })

  it('gives the same dose when a reading is added that lies on the line between two others', () => {
    const factor = fc.double({ min: 0, max: 2.5, noNaN: true })
    const minutes = fc.integer({ min: 2, max: 60 })
    fc.assert(
      fc.property(factor, factor, minutes, fc.double({ min: 0.01, max: 0.99, noNaN: true }), (left, right, length, share) => {
        const ends = [buildFactor(START, left), buildFactor(START + length * MINUTE_MS, right)]
        const at = Math.round(START + share * length * MINUTE_MS)
        const onTheLine = buildFactor(at, left + ((right - left) * (at - START)) / (length * MINUTE_MS))
        const now = ends[1]!.measuredAt
        const before = roomDose(roomSegments(ends, { now }), START, now).likely
        const after = roomDose(roomSegments([...ends, onTheLine], { now }), START, now).likely
        expect(Math.abs(after - before)).toBeLessThan(1e-12)
      }),
    )
  })
})
