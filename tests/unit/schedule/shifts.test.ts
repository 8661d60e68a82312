import { describe, expect, it } from 'vitest'
import { localDay, nextOpenInstant, pourDeadline, shiftsFrom, startOfLocalDay } from '@/lib/schedule/shifts'

const LONDON = 'Europe/London'
// Monday to Friday 07:00 to 17:00.
const WEEK = [1, 2, 3, 4, 5].map((weekday) => ({ weekday, opensMinute: 420, closesMinute: 1020 }))
const iso = (at: number | null) => (at === null ? null : new Date(at).toISOString())

describe('shifts', () => {
  it('skips closed days', () => {
    // Friday 16 October 2026, 18:00 in London: closed until Monday.
    const shifts = shiftsFrom(Date.parse('2026-10-16T17:00:00Z'), WEEK, LONDON)
    expect(iso(shifts[0]!.opensAt)).toBe('2026-10-19T06:00:00.000Z')
    expect(iso(nextOpenInstant(Date.parse('2026-10-17T10:00:00Z'), shifts))).toBe('2026-10-19T06:00:00.000Z')
  })

  it('keeps the hour on the wall when the clocks change', () => {
    // British Summer Time ends on Sunday 25 October 2026 and begins on Sunday 28 March 2027.
    const autumn = shiftsFrom(Date.parse('2026-10-23T17:00:00Z'), WEEK, LONDON)
    expect(iso(autumn[0]!.opensAt)).toBe('2026-10-26T07:00:00.000Z')
    const spring = shiftsFrom(Date.parse('2027-03-26T18:00:00Z'), WEEK, LONDON)
    expect(iso(spring[0]!.opensAt)).toBe('2027-03-29T06:00:00.000Z')
  })

  it('gives the instant itself inside a shift', () => {
    const now = Date.parse('2026-10-13T09:00:00Z')
    expect(nextOpenInstant(now, shiftsFrom(now, WEEK, LONDON))).toBe(now)
  })

  it('never closes a foundry that has set no hours', () => {
    const now = Date.parse('2026-10-18T02:00:00Z')
    expect(nextOpenInstant(now, shiftsFrom(now, [], LONDON))).toBe(now)
  })
})

describe('local days', () => {
  it('end at local midnight', () => {
    expect(localDay(Date.parse('2026-10-13T22:59:00Z'), LONDON)).toBe('2026-10-13')
    expect(localDay(Date.parse('2026-10-13T23:00:00Z'), LONDON)).toBe('2026-10-14')
    expect(iso(startOfLocalDay('2026-10-14', LONDON))).toBe('2026-10-13T23:00:00.000Z')
  })

  it('put the deadline of a pour at the opening of its day, or at midnight when closed', () => {
    expect(iso(pourDeadline('2026-10-14', WEEK, LONDON))).toBe('2026-10-14T06:00:00.000Z')
    expect(iso(pourDeadline('2026-10-17', WEEK, LONDON))).toBe('2026-10-16T23:00:00.000Z')
  })
})
