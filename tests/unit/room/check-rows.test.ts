import { describe, expect, it } from 'vitest'
import { checkRows, senderClock } from '@/lib/room/check-rows'

const NOW = Date.parse('2026-10-13T09:00:00Z')
const MINUTE = 60_000
const DAY = 1440 * MINUTE
const row = (measuredAt: unknown, rest: object = {}) => ({ measuredAt, airTempC: 21, relHumidityPct: 50, ...rest })

describe('the rows of a batch', () => {
  it('are readings where they are two numbers and a time that can be, and keep their place', () => {
    const checked = checkRows(
      [
        row(NOW),
        null,
        row(NOW + 2 * MINUTE),
        row(NOW + 2 * MINUTE + 1),
        row('2026-10-13T10:00:00+01:00', { airTempC: 400 }),
        row('2026-10-13 10:00'),
        row(NOW - 31 * DAY),
        row(NOW - 31 * DAY - 1),
        row(NOW, { relHumidityPct: '50' }),
        row(NOW, { airTempC: Infinity }),
        row(NOW, { dewPointC: 9 }),
        row(NOW, { pressurePa: 50_000 }),
        row(NOW, { pressurePa: 1013 }),
      ],
      NOW,
    )
    expect(checked.indexes).toEqual([0, 2, 4, 6, 11])
    expect(checked.rows[2]).toEqual({ measuredAt: NOW, airTempC: 400, relHumidityPct: 50 })
    expect(checked.rejected.map(({ index }) => index)).toEqual([1, 3, 5, 7, 8, 9, 10, 12])
    expect(checked.newestAt).toBe(NOW + 2 * MINUTE + 1)
  })
})

describe('the clock of a sender', () => {
  const clock = (sentAt: number | undefined, newestAt: number | null) => senderClock({ sentAt, newestAt, now: NOW })

  it('is told by its own time, to two minutes either way', () => {
    expect(clock(NOW + 7 * MINUTE, null)).toBe(420)
    expect(clock(NOW - 3 * MINUTE, NOW)).toBe(-180)
    expect(clock(NOW + 2 * MINUTE, NOW + 5 * MINUTE)).toBeNull()
  })

  it('is told by a row that lies ahead, and by a fresh one that does not', () => {
    expect(clock(undefined, NOW + 5 * MINUTE)).toBe(300)
    expect(clock(undefined, NOW - MINUTE)).toBeNull()
  })

  it('is not told by old rows: the logger may have been away', () => {
    expect(clock(undefined, NOW - 10 * MINUTE)).toBeUndefined()
    expect(clock(undefined, null)).toBeUndefined()
  })
})
