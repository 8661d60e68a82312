import { describe, expect, it } from 'vitest'
import { fanReason } from '@/lib/room/fan-words'
import { hasFans, measuredWords, speedWords } from '@/lib/room/place-air'

const AIR = { airSpeedFansOnMps: 1.5, airSpeedFansOffMps: 0.1, fanDuty: 1, fanHours: [] }
const MEASURED = { airMeasuredOn: '2026-11-12', airMeasuredWith: 'hot-wire meter', airMeasuredBy: 'Maud Penhale' } as const
const ESTIMATE = { airMeasuredOn: null, airMeasuredWith: null, airMeasuredBy: null }

describe('the air speed of a place in words', () => {
  it('is the one that counts, and how much of the time', () => {
    expect(speedWords(AIR, true)).toBe('1.5 m/s')
    expect(speedWords(AIR, false)).toBe('0.1 m/s')
    expect(speedWords({ ...AIR, fanDuty: 0.3 }, true)).toBe('1.5 m/s for 30 % of the time, else 0.1 m/s')
    expect(speedWords({ ...AIR, fanDuty: 0.3 }, false)).toBe('0.1 m/s')
  })

  it('has nothing to switch where it is the same, or the fans never blow there', () => {
    expect(hasFans(AIR)).toBe(true)
    for (const still of [
      { ...AIR, airSpeedFansOnMps: 0.1 },
      { ...AIR, fanDuty: 0 },
    ]) {
      expect(hasFans(still)).toBe(false)
      expect(speedWords(still, true)).toBe('0.1 m/s')
    }
  })

  it('was measured on a day, with what and by whom, as far as that is known', () => {
    const text = (overrides: Partial<typeof MEASURED | typeof ESTIMATE>) => measuredWords({ ...MEASURED, ...overrides }, '2026-12-01').text
    expect(text({})).toBe('measured 12 Nov, with a hot-wire meter by Maud Penhale')
    expect(text({ airMeasuredBy: null })).toBe('measured 12 Nov, with a hot-wire meter')
    expect(text({ airMeasuredWith: null, airMeasuredBy: null })).toBe('measured 12 Nov')
    expect(measuredWords(ESTIMATE, '2026-12-01')).toEqual({ text: 'estimated, not measured', isDue: true })
  })

  it.each([
    { today: '2027-11-12', isDue: false },
    { today: '2027-11-13', isDue: true },
    { today: '2026-11-12', isDue: false },
  ])('is measured again after a year: due on $today is $isDue', ({ today, isDue }) => {
    expect(measuredWords(MEASURED, today).isDue).toBe(isDue)
    expect(measuredWords(MEASURED, today).text.includes('measure again')).toBe(isDue)
  })

  it('from a leap day is due in March', () => {
    const leap = { ...ESTIMATE, airMeasuredOn: '2024-02-29' }
    expect(['2025-02-28', '2025-03-01'].map((today) => measuredWords(leap, today).isDue)).toEqual([false, true])
  })
})

describe('why the fans stand as they do', () => {
  // Tuesday 13 October 2026, 16:02 in London.
  const moment = { now: Date.parse('2026-10-13T15:02:00Z'), timeZone: 'Europe/London' }
  const said = { at: moment.now, by: 'Maud' }
  const until = Date.parse('2026-10-13T17:00:00Z')
  it.each([
    { fans: { isOn: true, until, said: null }, words: 'by the timetable, until 18:00' },
    { fans: { isOn: false, until: null, said: null }, words: 'by the timetable' },
    { fans: { isOn: false, until, said }, words: 'said by Maud at 16:02, until 18:00, then by the timetable' },
    { fans: { isOn: true, until: null, said }, words: 'said by Maud at 16:02, until somebody says otherwise' },
  ])('$words', ({ fans, words }) => {
    expect(fanReason(fans, moment)).toBe(words)
  })
})
