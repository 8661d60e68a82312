import * as fc from 'fast-check'
import type { Instant, ReadingSource, RoomReading } from '@/lib/drying/types'
import { buildFactor, MINUTE_MS, START } from './build-readings'

/** Readings of a day and a half at uneven minutes: close together, gaps of hours, typed ones between, still air at times. */
export function arbitraryReadings({ minLength = 1, from = START }: { minLength?: number; from?: Instant } = {}): fc.Arbitrary<
  RoomReading[]
> {
  const step = fc.oneof(
    { weight: 5, arbitrary: fc.integer({ min: 1, max: 60 }) },
    { weight: 1, arbitrary: fc.integer({ min: 61, max: 900 }) },
  )
  const factor = fc.oneof(
    { weight: 9, arbitrary: fc.double({ min: 0.001, max: 2.5, noNaN: true }) },
    { weight: 1, arbitrary: fc.constant(0) },
  )
  const source = fc.oneof(
    { weight: 6, arbitrary: fc.constant<ReadingSource>('sensor') },
    { weight: 1, arbitrary: fc.constant<ReadingSource>('typed') },
  )
  return fc.array(fc.record({ step, factor, source }), { minLength, maxLength: 40 }).map((rows) => {
    let measuredAt = from
    return rows.map((row) => {
      measuredAt += row.step * MINUTE_MS
      return buildFactor(measuredAt, row.factor, row.source)
    })
  })
}

/** An instant within two days of START, on any millisecond. */
export const arbitraryInstant = () => fc.integer({ min: START - 60 * MINUTE_MS, max: START + 48 * 60 * MINUTE_MS })
