import { TZDate } from '@date-fns/tz'
import { describe, expect, it } from 'vitest'
import { forecastSegments } from '@/lib/drying/forecast'
import type { DoseHour, Instant } from '@/lib/drying/types'
import { HOUR_MS } from './build-readings'

const NOW = Date.UTC(2026, 8, 15, 10, 20)

function buildHour(hourStart: Instant, dose: number, overrides: Partial<DoseHour> = {}): DoseHour {
  return { hourStart, dose: { likely: dose, low: dose, high: dose }, coveredMinutes: 60, gapMinutes: 0, hasTyped: false, ...overrides }
}

/** Rows of so many whole days before NOW's hour, their dose given by the UTC hour of the day and the day's number back. */
function buildDays(days: number, doseOf: (utcHour: number, daysAgo: number) => number): DoseHour[] {
  const lastHour = Date.UTC(2026, 8, 15, 10)
  return Array.from({ length: days * 24 }, (_, index) => {
    const hourStart = lastHour - (index + 1) * HOUR_MS
    return buildHour(hourStart, doseOf(new Date(hourStart).getUTCHours(), Math.floor(index / 24)))
  })
}

/** One row at 11:00 UTC for each of these days back, at a factor of 2. */
const elevens = (daysAgo: number[]) => daysAgo.map((days) => buildHour(Date.UTC(2026, 8, 15 - days, 11), 2))

const forecast = (hours: DoseHour[], overrides: Partial<Parameters<typeof forecastSegments>[0]> = {}) =>
  forecastSegments({ hours, now: NOW, timeZone: 'UTC', lastRoomFactor: 0.9, horizonHours: 48, ...overrides })

const rates = (segments: ReturnType<typeof forecast>) => segments.map((segment) => segment.likely.start)

describe('forecastSegments', () => {
  it('runs from now to the horizon without a hole, one hour at a time', () => {
    const segments = forecast(buildDays(14, () => 1))
    expect(segments[0]).toMatchObject({ from: NOW, to: Date.UTC(2026, 8, 15, 11), kind: 'forecast' })
    expect(segments.at(-1)?.to).toBe(NOW + 48 * HOUR_MS)
    for (const [index, segment] of segments.slice(1).entries()) expect(segment.from).toBe(segments[index]!.to)
  })

  it('takes the median of the hour of the day, whatever the outliers', () => {
    const segments = forecast(buildDays(5, (utcHour, daysAgo) => (daysAgo === 2 ? 9 : utcHour / 10 + daysAgo / 100)))
    // Values at 11:00 for the five days: 1.10, 1.11, 9, 1.13, 1.14.
    expect(segments[1]!.likely.start).toBeCloseTo(1.13, 12)
    expect(segments[1]).toMatchObject({ low: segments[1]!.likely, high: segments[1]!.likely })
  })

  it('takes the mean of the middle two where the days are even', () => {
    expect(rates(forecast(buildDays(4, (_, daysAgo) => [1, 2, 4, 8][daysAgo]!)))[1]).toBeCloseTo(3, 12)
  })

  it('goes by the local hour, not by UTC', () => {
    // The clocks of New York go back on 1 November 2026: 12:00 UTC is 08:00 before and 07:00 after.
    const now = Date.UTC(2026, 10, 2, 5)
    const rows = Array.from({ length: 14 * 24 }, (_, index) => {
      const hourStart = now - (index + 1) * HOUR_MS
      return buildHour(hourStart, new TZDate(hourStart, 'America/New_York').getHours() / 10)
    })
    const segments = forecast(rows, { now, timeZone: 'America/New_York', horizonHours: 24 })
    expect(segments.find((segment) => segment.from === Date.UTC(2026, 10, 2, 12))?.likely.start).toBeCloseTo(0.7, 12)
  })

  it('takes the median of the last 24 h for an hour of the day with under three days', () => {
    const rows = buildDays(2, (_, daysAgo) => (daysAgo === 0 ? 0.5 : 2))
    expect(new Set(rates(forecast(rows)))).toEqual(new Set([0.5]))
    expect(rates(forecast(buildDays(3, () => 1)))[1]).toBe(1)
  })

  it('takes the newest reading where there is no whole hour of the last 24 h', () => {
    expect(new Set(rates(forecast([])))).toEqual(new Set([0.9]))
    const old = buildDays(2, () => 2).map((row) => Object.assign(row, { hourStart: row.hourStart - 48 * HOUR_MS }))
    expect(new Set(rates(forecast(old)))).toEqual(new Set([0.9]))
  })

  it('looks back over 14 days and no further', () => {
    expect(rates(forecast(elevens([2, 7, 13])))[1]).toBe(2)
    expect(rates(forecast(elevens([2, 7, 15])))[1]).toBe(0.9)
  })

  it('knows nothing where there never was a reading', () => {
    expect(forecast([], { lastRoomFactor: null })).toEqual([])
  })

  it.each([
    { name: 'an hour with a hole', overrides: { coveredMinutes: 59 } },
    { name: 'an hour in a gap', overrides: { gapMinutes: 60 } },
    { name: 'an hour not over yet', overrides: { hourStart: Date.UTC(2026, 8, 15, 10) } },
  ])('passes over $name', ({ overrides }) => {
    expect(new Set(rates(forecast([buildHour(Date.UTC(2026, 8, 15, 9), 7, overrides)])))).toEqual(new Set([0.9]))
  })
})
