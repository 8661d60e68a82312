import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { ReadingSource } from '@/lib/drying/types'
import { readingMarks, standsBefore } from '@/lib/room/reading-marks'

const MINUTE = 60_000
const at = (minutes: number, relHumidityPct = 50, airTempC = 21, source: ReadingSource = 'sensor') => ({
  measuredAt: 1_000 * MINUTE + minutes * MINUTE,
  airTempC,
  relHumidityPct,
  source,
})
/** One reading every five minutes, all the same. */
const still = (count: number, source: ReadingSource = 'sensor') =>
  Array.from({ length: count }, (_, index) => at(index * 5, 50, 21, source))
const marked = (readings: Parameters<typeof readingMarks>[0]) =>
  readingMarks(readings).flatMap((mark, index) => (mark === null ? [] : [`${index} ${mark}`]))

describe('a jump', () => {
  it('is away from both its neighbours by more than the limit', () => {
    expect(marked([at(0), at(5, 91), at(10)])).toEqual(['1 jump'])
    expect(marked([at(0), at(5, 50, 31.5), at(10)])).toEqual(['1 jump'])
    expect(marked([at(0), at(5, 90), at(10)])).toEqual([])
    expect(marked([at(0), at(5, 50, 31), at(10)])).toEqual([])
  })

  it('is no step that stays, no first and no last reading', () => {
    expect(marked([at(0), at(5, 95), at(10, 95)])).toEqual([])
    expect(marked([at(0, 5), at(5), at(10, 5)])).toEqual(['1 jump'])
    expect(marked([at(0), at(5, 95)])).toEqual([])
  })

  it('is told from readings within five minutes only, give or take the half of one', () => {
    expect(marked([at(0), at(5.5, 95), at(11)])).toEqual(['1 jump'])
    expect(marked([at(0), at(6, 95), at(11)])).toEqual([])
    expect(marked([at(0), at(2, 5, 21, 'typed'), at(4)])).toEqual(['1 jump'])
  })
})

describe('a flat line', () => {
  it('is what has not moved in either value for more than six hours', () => {
    expect(marked(still(73))).toEqual([])
    expect(marked(still(75))).toEqual(['73 flat', '74 flat'])
    expect(marked([...still(75), at(75 * 5, 50.1)])).toEqual(['73 flat', '74 flat'])
    expect(marked(still(75).with(70, at(350, 50, 21.1)))).toEqual([])
  })

  it('is not told through a silence of more than an hour', () => {
    const hourly = (gap: number) => Array.from({ length: 9 }, (_, index) => at(index * gap))
    expect(marked(hourly(60))).toEqual(['7 flat', '8 flat'])
    expect(marked(hourly(61))).toEqual([])
  })

  it('is never typed, and a typed reading among the others does not end it', () => {
    expect(marked(still(200, 'typed'))).toEqual([])
    const looked = [...still(75).slice(0, 40), at(198, 55, 22, 'typed'), ...still(75).slice(40)]
    expect(marked(looked)).toEqual(['74 flat', '75 flat'])
  })
})

describe('of two readings of one instant', () => {
  const claim = fc.record({
    source: fc.constantFrom<ReadingSource>('sensor', 'typed'),
    airTempC: fc.constantFrom(20, 21),
    relHumidityPct: fc.constantFrom(50, 51),
    pressurePa: fc.constantFrom(null, 100_000, 101_000),
  })

  it('the same one stands, whichever came first', () => {
    fc.assert(
      fc.property(claim, claim, (one, other) => {
        const isSame = JSON.stringify(one) === JSON.stringify(other)
        expect(standsBefore(one, other) === standsBefore(other, one)).toBe(isSame)
      }),
    )
  })

  it('the sensor stands before the person, then the damper one', () => {
    const damp = { source: 'sensor' as const, airTempC: 21, relHumidityPct: 60, pressurePa: null }
    expect(standsBefore({ ...damp, source: 'typed' }, { ...damp, relHumidityPct: 50 })).toBe(true)
    expect(standsBefore({ ...damp, relHumidityPct: 50 }, damp)).toBe(true)
    expect(standsBefore(damp, damp)).toBe(false)
  })
})
