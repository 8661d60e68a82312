import { describe, expect, it } from 'vitest'
import { curveRows, evenBounds, hourTicks, thinOut } from '@/lib/trees/curve-series'

const HOUR = 3_600_000
const start = Date.parse('2026-10-13T09:55:00Z')

describe('curveRows', () => {
  it('joins the past and the forecast at one point', () => {
    const rows = curveRows([
      { at: start + HOUR, likelyPct: 40, lowPct: 30, highPct: 45, isForecast: true },
      { at: start, likelyPct: 100, lowPct: 100, highPct: 100, isForecast: false },
      { at: start + HOUR / 2, likelyPct: 60, lowPct: 55, highPct: 65, isForecast: false },
    ])
    expect(rows.map((row) => [row.pastPct, row.forecastPct])).toEqual([
      [100, null],
      [60, 60],
      [null, 40],
    ])
  })

  it('is empty without points and keeps a forecast alone', () => {
    expect(curveRows([])).toEqual([])
    expect(curveRows([{ at: start, likelyPct: 90, lowPct: 95, highPct: 80, isForecast: true }])[0]).toMatchObject({ band: [80, 95] })
  })
})

describe('hourTicks', () => {
  it('stands on whole local hours', () => {
    expect(hourTicks(start, start + 4 * HOUR, 'Europe/London').map((at) => new Date(at).toISOString().slice(11, 16))).toEqual([
      '10:00',
      '11:00',
      '12:00',
      '13:00',
    ])
    // Half-hour zone: 15:30 in India is a whole hour there only at :30 UTC.
    expect(new Date(hourTicks(start, start + 2 * HOUR, 'Asia/Kolkata')[0]!).toISOString().slice(14, 16)).toBe('30')
  })

  it('never gives more than asked for and follows a clock change', () => {
    const beforeChange = Date.parse('2026-10-24T12:00:00Z')
    for (const hours of [0, 1, 8, 30, 80, 700, 9000]) {
      expect(hourTicks(beforeChange, beforeChange + hours * HOUR, 'Europe/London').length).toBeLessThanOrEqual(9)
    }
    const clock = (at: number) =>
      new Date(at).toLocaleTimeString('en-GB', { timeZone: 'Europe/London', hour: '2-digit', minute: '2-digit' })
    const clocks = hourTicks(beforeChange, beforeChange + 80 * HOUR, 'Europe/London').map(clock)
    expect(clocks).toEqual(['00:00', '12:00', '00:00', '12:00', '00:00', '12:00'])
  })

  it('refuses a span that ends before it starts', () => {
    expect(() => hourTicks(start, start - 1, 'UTC')).toThrow(RangeError)
    expect(() => hourTicks(Number.NaN, start, 'UTC')).toThrow(RangeError)
  })
})

describe('thinOut and evenBounds', () => {
  it('keeps both ends', () => {
    const rows = Array.from({ length: 100 }, (_, index) => index)
    expect(thinOut(rows, 5)).toEqual([0, 25, 50, 74, 99])
    expect(thinOut([1, 2], 5)).toEqual([1, 2])
  })
  it('holds every value between even bounds', () => {
    expect(evenBounds([21.2, 21.9], 2)).toEqual([20, 22])
    expect(evenBounds([20, 20], 2)).toEqual([20, 22])
    expect(evenBounds([], 10)).toEqual([0, 10])
  })
})
