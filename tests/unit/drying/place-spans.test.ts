import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { placeFactor } from '@/lib/drying/place-factor'
import { placeSpans } from '@/lib/drying/place-spans'
import type { FanHours, Instant } from '@/lib/drying/types'
import { HOUR_MS, SEA_LEVEL_PA } from './build-readings'

const ON = placeFactor(1.5, SEA_LEVEL_PA)
const OFF = placeFactor(0.1, SEA_LEVEL_PA)

/** Monday to Friday, 07:30 to 17:30. */
const WORKING_WEEK: FanHours[] = [1, 2, 3, 4, 5].map((weekday) => ({ weekday, onMinute: 450, offMinute: 1050 }))

function spansOf(from: Instant, to: Instant, timeZone = 'UTC', fanHours: readonly FanHours[] = WORKING_WEEK) {
  const place = { airSpeedFansOnMps: 1.5, airSpeedFansOffMps: 0.1, fanDuty: 1, fanHours }
  return placeSpans({ from, to, place, overrides: [], pressurePa: SEA_LEVEL_PA, timeZone })
}

const readable = (spans: ReturnType<typeof spansOf>) =>
  spans.map(({ from, to, placeFactor: factor }) => [
    new Date(from).toISOString().slice(5, 16),
    new Date(to).toISOString().slice(5, 16),
    factor === ON ? 'on' : 'off',
  ])

describe('placeSpans', () => {
  it('turns the fans off for the night and the week-end', () => {
    // 4 September 2026 is a Friday.
    expect(readable(spansOf(Date.UTC(2026, 8, 4, 12), Date.UTC(2026, 8, 7, 9)))).toEqual([
      ['09-04T12:00', '09-04T17:30', 'on'],
      ['09-04T17:30', '09-07T07:30', 'off'],
      ['09-07T07:30', '09-07T09:00', 'on'],
    ])
  })

  it('has the fans off throughout where there is no timetable', () => {
    expect(readable(spansOf(Date.UTC(2026, 8, 4), Date.UTC(2026, 8, 7), 'UTC', []))).toEqual([['09-04T00:00', '09-07T00:00', 'off']])
  })

  it('joins rows that touch or overlap, across midnight too', () => {
    const rows: FanHours[] = [
      { weekday: 5, onMinute: 1200, offMinute: 1440 },
      { weekday: 5, onMinute: 1260, offMinute: 1320 },
      { weekday: 6, onMinute: 0, offMinute: 60 },
    ]
    expect(readable(spansOf(Date.UTC(2026, 8, 4, 12), Date.UTC(2026, 8, 5, 12), 'UTC', rows))).toEqual([
      ['09-04T12:00', '09-04T20:00', 'off'],
      ['09-04T20:00', '09-05T01:00', 'on'],
      ['09-05T01:00', '09-05T12:00', 'off'],
    ])
  })

  it.each([
    { name: 'the clocks go forward in Berlin', timeZone: 'Europe/Berlin', friday: [2026, 2, 27], before: '16:30', after: '05:30' },
    { name: 'the clocks go back in Berlin', timeZone: 'Europe/Berlin', friday: [2026, 9, 23], before: '15:30', after: '06:30' },
    { name: 'the clocks go forward in New York', timeZone: 'America/New_York', friday: [2026, 2, 6], before: '22:30', after: '11:30' },
    { name: 'the clocks go back in New York', timeZone: 'America/New_York', friday: [2026, 9, 30], before: '21:30', after: '12:30' },
    { name: 'midnight itself is skipped in Santiago', timeZone: 'America/Santiago', friday: [2026, 8, 4], before: '21:30', after: '10:30' },
  ])('follows the wall clock over the week-end when $name', ({ timeZone, friday, before, after }) => {
    const noon = Date.UTC(friday[0]!, friday[1], friday[2], 17 - (timeZone.startsWith('Europe') ? 5 : 0))
    const [work, rest, monday] = readable(spansOf(noon, noon + 70 * HOUR_MS, timeZone))
    expect(work?.[1]?.slice(6)).toBe(before)
    expect(rest?.[2]).toBe('off')
    expect(rest?.[1]?.slice(6)).toBe(after)
    expect(monday?.[2]).toBe('on')
  })

  it('covers exactly the time asked for, in order, whatever the zone and the timetable', () => {
    const row = fc
      .record({
        weekday: fc.integer({ min: 1, max: 7 }),
        onMinute: fc.integer({ min: 0, max: 1439 }),
        length: fc.integer({ min: 1, max: 1440 }),
      })
      .map(({ weekday, onMinute, length }) => ({ weekday, onMinute, offMinute: Math.min(1440, onMinute + length) }))
    const zone = fc.constantFrom('UTC', 'Europe/Berlin', 'America/New_York', 'Asia/Kolkata', 'Australia/Lord_Howe', 'America/Santiago')
    const start = fc.integer({ min: Date.UTC(2026, 0), max: Date.UTC(2027, 0) })
    fc.assert(
      fc.property(
        start,
        fc.integer({ min: 1, max: 200 * HOUR_MS }),
        zone,
        fc.array(row, { maxLength: 10 }),
        (from, length, timeZone, rows) => {
          const spans = spansOf(from, from + length, timeZone, rows)
          expect(spans[0]?.from).toBe(from)
          expect(spans.at(-1)?.to).toBe(from + length)
          for (const span of spans) expect(span.to).toBeGreaterThan(span.from)
          for (const [index, span] of spans.slice(1).entries()) {
            expect(span.from).toBe(spans[index]?.to)
            expect(span.placeFactor).not.toBe(spans[index]?.placeFactor)
          }
        },
      ),
    )
  })

  it('agrees with the wall clock at any minute', () => {
    const wallClock = new Intl.DateTimeFormat('en-GB', { timeZone: 'Europe/Berlin', weekday: 'short', hour: '2-digit', minute: '2-digit' })
    const spans = spansOf(Date.UTC(2026, 2, 20), Date.UTC(2026, 3, 5), 'Europe/Berlin')
    fc.assert(
      fc.property(fc.integer({ min: Date.UTC(2026, 2, 20), max: Date.UTC(2026, 3, 4) }), (at) => {
        const parts = Object.fromEntries(wallClock.formatToParts(at).map(({ type, value }) => [type, value]))
        const minute = Number(parts.hour) * 60 + Number(parts.minute)
        const isOn = !['Sat', 'Sun'].includes(parts.weekday ?? '') && minute >= 450 && minute < 1050
        expect(spans.find((span) => span.from <= at && at < span.to)?.placeFactor).toBe(isOn ? ON : OFF)
      }),
    )
  })

  it('is empty where the end is not after the start', () => {
    expect(spansOf(5, 5)).toEqual([])
    expect(spansOf(5, 4)).toEqual([])
  })

  it.each([
    { name: 'an endless stay', work: () => spansOf(0, Infinity) },
    { name: 'an unknown zone', work: () => spansOf(0, 1, 'Nowhere/Land') },
    { name: 'weekday 0', work: () => spansOf(0, 1, 'UTC', [{ weekday: 0, onMinute: 0, offMinute: 60 }]) },
    { name: 'fans off before on', work: () => spansOf(0, 1, 'UTC', [{ weekday: 1, onMinute: 600, offMinute: 600 }]) },
  ])('refuses $name', ({ work }) => {
    expect(work).toThrow(RangeError)
  })
})
