import { describe, expect, it } from 'vitest'
import { dayWord, formatClock, formatDate, formatDay, formatMoment, localDay } from '@/lib/format/local-time'

const at = (iso: string) => Date.parse(iso)

describe('formatClock', () => {
  it('shows the foundry’s wall clock in 24 h, midnight as 00:00', () => {
    expect(formatClock(at('2026-10-13T14:10:00Z'), 'Europe/London')).toBe('15:10')
    expect(formatClock(at('2026-10-12T23:00:00Z'), 'Europe/London')).toBe('00:00')
    expect(formatClock(at('2026-01-12T05:05:00Z'), 'America/New_York')).toBe('00:05')
  })

  it('jumps over the missing hour in spring', () => {
    expect(formatClock(at('2026-03-29T00:59:00Z'), 'Europe/London')).toBe('00:59')
    expect(formatClock(at('2026-03-29T01:00:00Z'), 'Europe/London')).toBe('02:00')
  })

  it('shows the doubled hour twice in autumn', () => {
    expect(formatClock(at('2026-10-25T00:30:00Z'), 'Europe/London')).toBe('01:30')
    expect(formatClock(at('2026-10-25T01:30:00Z'), 'Europe/London')).toBe('01:30')
  })
})

describe('dayWord', () => {
  const zone = 'Europe/London'
  const now = at('2026-10-13T14:10:00Z')

  it.each([
    ['today', '2026-10-13T22:59:00Z', ''],
    ['a minute past midnight', '2026-10-13T23:01:00Z', 'Wed'],
    ['six days on', '2026-10-19T12:00:00Z', 'Mon'],
    ['a week on, where the weekday alone would mislead', '2026-10-20T12:00:00Z', 'Tue 20 Oct'],
    ['yesterday', '2026-10-12T12:00:00Z', 'Mon'],
  ])('%s', (_name, iso, word) => {
    expect(dayWord(at(iso), now, zone)).toBe(word)
  })

  it('counts calendar days across the 23 h day of spring', () => {
    expect(dayWord(at('2026-04-04T00:30:00Z'), at('2026-03-28T23:30:00Z'), zone)).toBe('Sat 4 Apr')
    expect(dayWord(at('2026-03-29T22:30:00Z'), at('2026-03-29T00:10:00Z'), zone)).toBe('')
  })

  it('takes the day from the foundry’s zone, not the browser’s', () => {
    expect(dayWord(at('2026-10-14T02:00:00Z'), now, 'America/New_York')).toBe('')
    expect(localDay(at('2026-10-14T02:00:00Z'), 'America/New_York')).toBe('2026-10-13')
  })
})

describe('dates', () => {
  it('are short and even', () => {
    expect(formatDate(at('2026-10-13T14:10:00Z'), 'Europe/London')).toBe('Tue 13 Oct')
    expect(formatDate(at('2026-09-03T14:10:00Z'), 'Europe/London')).toBe('Thu 3 Sep')
    expect(formatDay('2026-10-16')).toBe('Fri 16 Oct')
  })

  it('go before a time that is not today', () => {
    const now = at('2026-10-13T14:10:00Z')
    expect(formatMoment(at('2026-10-13T14:35:00Z'), now, 'Europe/London')).toBe('15:35')
    expect(formatMoment(at('2026-10-14T21:00:00Z'), now, 'Europe/London')).toBe('Wed 22:00')
  })
})
