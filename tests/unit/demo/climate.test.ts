import { TZDate } from '@date-fns/tz'
import { describe, expect, it } from 'vitest'
import { DEMO_AIRS, demoAirAt } from '@/lib/demo/climate'
import { feedRows } from '@/lib/demo/feed-rows'

const MINUTE_MS = 60_000
const HOUR_MS = 60 * MINUTE_MS
const DAY_MS = 24 * HOUR_MS
const startsAt = Date.UTC(2026, 10, 17)
const climate = { seed: 20, startsAt, timeZone: 'Europe/London' }
const every = (stepMs: number, days: number) => Array.from({ length: (days * DAY_MS) / stepMs }, (_, step) => startsAt + step * stepMs)
const mean = (values: readonly number[]) => values.reduce((sum, value) => sum + value, 0) / values.length

describe.each(DEMO_AIRS)('air of the %s', (air) => {
  const month = every(10 * MINUTE_MS, 35).map((at) => ({ at, ...demoAirAt(climate, air, at) }))
  const hourOf = (at: number) => new TZDate(at, climate.timeZone).getHours()
  const weekdayOf = (at: number) => new TZDate(at, climate.timeZone).getDay()

  it('is the same however often it is asked for', () => {
    expect(demoAirAt(climate, air, startsAt + 12_345_678)).toEqual(demoAirAt({ ...climate }, air, startsAt + 12_345_678))
  })
  it('stays within what a shell room can be', () => {
    expect(Math.min(...month.map(({ airTempC }) => airTempC))).toBeGreaterThan(16)
    expect(Math.max(...month.map(({ airTempC }) => airTempC))).toBeLessThan(24)
    expect(Math.min(...month.map(({ relHumidityPct }) => relHumidityPct))).toBeGreaterThan(45)
    expect(Math.max(...month.map(({ relHumidityPct }) => relHumidityPct))).toBeLessThanOrEqual(88)
  })
  it('is damp at night and dried on working days', () => {
    const nights = month.filter(({ at }) => hourOf(at) >= 3 && hourOf(at) < 5)
    const working = month.filter(({ at }) => weekdayOf(at) > 0 && weekdayOf(at) < 6 && hourOf(at) >= 9 && hourOf(at) < 17)
    expect(mean(nights.map(({ relHumidityPct }) => relHumidityPct))).toBeGreaterThan(78)
    expect(mean(working.map(({ relHumidityPct }) => relHumidityPct))).toBeGreaterThan(50)
    expect(mean(working.map(({ relHumidityPct }) => relHumidityPct))).toBeLessThan(61)
  })
  it('is never above 75 % for twelve hours on end outside a front, so that finished shells do not spoil overnight', () => {
    let since: number | null = null
    let longest = 0
    for (const { at, relHumidityPct } of month.filter((reading) => reading.at < startsAt + 5 * DAY_MS)) {
      since = relHumidityPct > 75 ? (since ?? at) : null
      longest = Math.max(longest, since === null ? 0 : at - since)
    }
    expect(longest).toBeLessThan(12 * HOUR_MS)
  })
  it('moves smoothly from minute to minute, over a clock change too', () => {
    for (const from of [startsAt, Date.UTC(2027, 2, 28)]) {
      for (let at = from; at < from + DAY_MS; at += MINUTE_MS) {
        const [before, after] = [demoAirAt(climate, air, at), demoAirAt(climate, air, at + MINUTE_MS)]
        expect(Math.abs(after.relHumidityPct - before.relHumidityPct)).toBeLessThan(1.6)
        expect(Math.abs(after.airTempC - before.airTempC)).toBeLessThan(0.35)
      }
    }
  })
  it('brings a front within the first fortnight and another one later', () => {
    const noonOf = (day: number) => demoAirAt(climate, air, startsAt + day * DAY_MS + 14 * HOUR_MS).relHumidityPct
    expect(noonOf(6)).toBeGreaterThan(noonOf(9) + 1)
  })
})

describe('what the feed sends', () => {
  const now = startsAt + 20 * DAY_MS + 17_000
  it('is this minute after the last one', () => {
    const rows = feedRows(climate, 'shell room', { newestAt: now - 77_000, now })
    expect(rows.map(({ measuredAt }) => measuredAt)).toEqual([Math.floor(now / MINUTE_MS) * MINUTE_MS])
  })
  it('is nothing when the minute is there', () => {
    expect(feedRows(climate, 'shell room', { newestAt: Math.floor(now / MINUTE_MS) * MINUTE_MS, now })).toEqual([])
  })
  it('is every five minutes of a pause and then this minute, the same air as the past', () => {
    const later = now + 3 * MINUTE_MS
    const rows = feedRows(climate, 'net loft', { newestAt: now - HOUR_MS, now: later })
    expect(rows).toHaveLength(13)
    expect(rows.slice(0, -1).every(({ measuredAt }) => measuredAt % (5 * MINUTE_MS) === 0)).toBe(true)
    for (const row of rows) expect(row).toMatchObject(demoAirAt(climate, 'net loft', row.measuredAt))
  })
  it('goes back 31 days at most', () => {
    const rows = feedRows(climate, 'net loft', { newestAt: null, now })
    expect(rows.length).toBeLessThan(31 * 288)
    expect(rows[0]?.measuredAt).toBeGreaterThan(now - 31 * DAY_MS)
  })
})
