import { describe, expect, it } from 'vitest'
import { formatMinute, readClock } from '@/lib/schedule/clock-text'
import { closureInput, readClosureForm } from '@/lib/schedule/closure-input'
import { hoursInput, readHoursForm } from '@/lib/schedule/hours-input'
import { weekWords } from '@/lib/schedule/week-words'
import { fieldErrors } from '@/lib/trees/tree-form-values'

const formOf = (fields: Record<string, string>) => {
  const form = new FormData()
  for (const [name, value] of Object.entries(fields)) form.set(name, value)
  return form
}

describe('a wall clock', () => {
  it.each([
    ['7', 420],
    ['07', 420],
    ['7:05', 425],
    ['07.30', 450],
    ['0730', 450],
    [' 16h30 ', 990],
    ['0:00', 0],
    ['24:00', 1440],
  ])('%j is read', (text, minute) => {
    expect(readClock(text)).toBe(minute)
  })

  it.each(['', '25', '24:01', '7:60', '7:5', 'noon', '-1', '7:30 pm', '07:30:00'])('%j is none', (text) => {
    expect(readClock(text)).toBeNull()
  })

  it('is written with two figures each', () => {
    expect([0, 425, 1440].map(formatMinute)).toEqual(['00:00', '07:05', '24:00'])
  })
})

describe('the hours of a week', () => {
  const WORKDAYS = Object.fromEntries(
    [0, 1, 2, 3, 4].flatMap((day) => [
      [`days.${day}.isOpen`, 'on'],
      [`days.${day}.opens`, '7'],
      [`days.${day}.closes`, '16:30'],
    ]),
  )
  const parse = (fields: Record<string, string>) => hoursInput.safeParse(readHoursForm(formOf(fields)))
  const complaints = (fields: Record<string, string>) => {
    const parsed = parse(fields)
    return parsed.success ? {} : fieldErrors(parsed.error)
  }

  it('are those of the open days; what stands on a closed one does not matter', () => {
    expect(parse({ ...WORKDAYS, 'days.6.opens': 'nonsense' }).data).toEqual(
      [1, 2, 3, 4, 5].map((weekday) => ({ weekday, opensMinute: 420, closesMinute: 990 })),
    )
  })

  it('may end at midnight, written either way', () => {
    for (const closes of ['24:00', '00:00']) {
      expect(parse({ 'days.0.isOpen': 'on', 'days.0.opens': '14', 'days.0.closes': closes }).data).toEqual([
        { weekday: 1, opensMinute: 840, closesMinute: 1440 },
      ])
    }
  })

  it('open before they close, and say beside which field they do not', () => {
    expect(complaints({ ...WORKDAYS, 'days.2.closes': '7' })).toEqual({ 'days.2.closes': 'A shift closes after it opens.' })
    expect(complaints({ ...WORKDAYS, 'days.1.opens': 'early' })).toEqual({ 'days.1.opens': 'A time of day, such as 07:00.' })
    expect(complaints({ ...WORKDAYS, 'days.1.opens': '24:00' })['days.1.opens']).toBe('It starts before 24:00.')
  })

  it('hold at least one open day', () => {
    expect(complaints({})).toEqual({ days: 'At least one day is open.' })
  })
})

describe('closed days', () => {
  const parse = (fields: Record<string, string>) => closureInput.safeParse(readClosureForm(formOf(fields)))

  it('of one day need the first day alone', () => {
    expect(parse({ name: ' Fair ', firstDay: '2026-12-02', lastDay: '' }).data).toEqual({
      name: 'Fair',
      firstDay: '2026-12-02',
      lastDay: '2026-12-02',
    })
  })

  it.each([
    ['a last day before the first', { name: 'A', firstDay: '2026-12-02', lastDay: '2026-12-01' }, 'lastDay'],
    ['a day that is none', { name: 'A', firstDay: '2026-02-30', lastDay: '2026-03-01' }, 'firstDay'],
    ['29 February of a common year', { name: 'A', firstDay: '2026-02-01', lastDay: '2026-02-29' }, 'lastDay'],
    ['more than a year', { name: 'A', firstDay: '2026-01-01', lastDay: '2027-01-02' }, 'lastDay'],
    ['no name', { name: '  ', firstDay: '2026-12-02', lastDay: '' }, 'name'],
    ['a name of 61 letters', { name: 'a'.repeat(61), firstDay: '2026-12-02', lastDay: '' }, 'name'],
  ])('are refused with %s', (_words, fields, field) => {
    const parsed = parse(fields)
    expect(Object.keys(fieldErrors(parsed.error!))).toEqual([field])
  })

  it('may last a whole leap year', () => {
    expect(parse({ name: 'A', firstDay: '2028-01-01', lastDay: '2028-12-31' }).success).toBe(true)
  })
})

describe('a timetable in words', () => {
  const span = (weekday: number, fromMinute: number, toMinute: number) => ({ weekday, fromMinute, toMinute })

  it('draws days together that are alike, and only neighbours', () => {
    expect(weekWords([span(1, 420, 720), span(2, 420, 720), span(4, 420, 720)], 'never')).toBe('Mon to Tue 07:00–12:00; Thu 07:00–12:00')
  })

  it('puts the stretches of a day in order', () => {
    expect(weekWords([span(7, 780, 1440), span(7, 0, 360)], 'never')).toBe('Sun 00:00–06:00, 13:00–24:00')
  })

  it('has a word for none', () => {
    expect(weekWords([], 'never')).toBe('never')
  })
})
