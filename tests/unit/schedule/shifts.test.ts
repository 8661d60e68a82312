import { describe, expect, it } from 'vitest'
import { localDay } from '@/lib/format/local-time'
import { isClosedDay, nextOpenInstant, pourDeadline, shiftsFrom, startOfLocalDay, type WorkCalendar } from '@/lib/schedule/shifts'

const LONDON = 'Europe/London'
// Monday to Friday 07:00 to 17:00.
const HOURS = [1, 2, 3, 4, 5].map((weekday) => ({ weekday, opensMinute: 420, closesMinute: 1020 }))
const WEEK: WorkCalendar = { hours: HOURS, closures: [] }
const closed = (...closures: [firstDay: string, lastDay: string][]): WorkCalendar => ({
  hours: HOURS,
  closures: closures.map(([firstDay, lastDay]) => ({ firstDay, lastDay })),
})
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
    expect(nextOpenInstant(now, shiftsFrom(now, { hours: [], closures: [] }, LONDON))).toBe(now)
  })
})

describe('closed days', () => {
  const days = (calendar: WorkCalendar, from: string) =>
    shiftsFrom(Date.parse(from), calendar, LONDON).map((shift) => localDay(shift.opensAt, LONDON))

  it('are skipped, both ends included', () => {
    // Wednesday 14 and Thursday 15 October 2026.
    expect(days(closed(['2026-10-14', '2026-10-15']), '2026-10-13T09:00:00Z').slice(0, 3)).toEqual([
      '2026-10-13',
      '2026-10-16',
      '2026-10-19',
    ])
    expect(days(closed(['2026-10-13', '2026-10-13']), '2026-10-13T09:00:00Z')[0]).toBe('2026-10-14')
  })

  it('may touch and overlap', () => {
    const calendar = closed(['2026-10-14', '2026-10-16'], ['2026-10-16', '2026-10-19'], ['2026-10-20', '2026-10-20'])
    expect(days(calendar, '2026-10-13T18:00:00Z')[0]).toBe('2026-10-21')
  })

  it('of weeks still leave a next shift and one after it', () => {
    // Closed for five weeks from Monday 14 December 2026; open again on Monday 18 January 2027.
    const calendar = closed(['2026-12-14', '2027-01-17'])
    const shifts = shiftsFrom(Date.parse('2026-12-15T10:00:00Z'), calendar, LONDON)
    expect(shifts.map((shift) => iso(shift.opensAt))).toEqual(['2027-01-18T07:00:00.000Z', '2027-01-19T07:00:00.000Z'])
    // In the last shift before it the next one is found as well.
    const last = shiftsFrom(Date.parse('2026-12-11T10:00:00Z'), calendar, LONDON)
    expect(last.map((shift) => iso(shift.opensAt))).toEqual(['2026-12-11T07:00:00.000Z', '2027-01-18T07:00:00.000Z'])
    expect(iso(nextOpenInstant(Date.parse('2026-12-11T18:00:00Z'), last))).toBe('2027-01-18T07:00:00.000Z')
  })

  it('for ever leave none, and the search ends', () => {
    expect(shiftsFrom(Date.parse('2026-12-15T10:00:00Z'), closed(['2026-01-01', '2100-01-01']), LONDON)).toEqual([])
  })

  it('over a change of the clocks reopen at the hour on the wall', () => {
    // British Summer Time ends on Sunday 25 October 2026: the same hour is an hour later in UTC.
    const autumn = shiftsFrom(Date.parse('2026-10-22T17:00:00Z'), closed(['2026-10-23', '2026-10-27']), LONDON)
    expect(iso(autumn[0]!.opensAt)).toBe('2026-10-28T07:00:00.000Z')
    // It begins on Sunday 28 March 2027.
    const spring = shiftsFrom(Date.parse('2027-03-25T18:00:00Z'), closed(['2027-03-26', '2027-03-29']), LONDON)
    expect(iso(spring[0]!.opensAt)).toBe('2027-03-30T06:00:00.000Z')
    // A closure that ends on the day of the change itself.
    const sunday = { ...closed(['2026-10-24', '2026-10-25']), hours: [...HOURS, { weekday: 7, opensMinute: 420, closesMinute: 1020 }] }
    expect(days(sunday, '2026-10-23T18:00:00Z')[0]).toBe('2026-10-26')
  })

  it('are local days: in Auckland it is tomorrow while London still works', () => {
    const shifts = shiftsFrom(Date.parse('2026-10-13T20:00:00Z'), closed(['2026-10-14', '2026-10-14']), 'Pacific/Auckland')
    // 13 October, 20:00 UTC is Wednesday 14 October, 09:00 there (UTC+13): closed until Thursday, 07:00.
    expect(iso(shifts[0]!.opensAt)).toBe('2026-10-14T18:00:00.000Z')
  })

  it('close a foundry that has set no hours too', () => {
    const calendar: WorkCalendar = { hours: [], closures: [{ firstDay: '2026-10-18', lastDay: '2026-10-19' }] }
    const now = Date.parse('2026-10-18T02:00:00Z')
    expect(iso(nextOpenInstant(now, shiftsFrom(now, calendar, LONDON)))).toBe('2026-10-19T23:00:00.000Z')
  })

  it('know their own ends', () => {
    const { closures } = closed(['2026-12-24', '2027-01-03'])
    expect(['2026-12-23', '2026-12-24', '2027-01-03', '2027-01-04'].map((day) => isClosedDay(day, closures))).toEqual([
      false,
      true,
      true,
      false,
    ])
  })

  it('put the deadline of a pour on them at midnight', () => {
    expect(iso(pourDeadline('2026-10-14', closed(['2026-10-14', '2026-10-14']), LONDON))).toBe('2026-10-13T23:00:00.000Z')
    expect(iso(pourDeadline('2026-10-15', closed(['2026-10-14', '2026-10-14']), LONDON))).toBe('2026-10-15T06:00:00.000Z')
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
