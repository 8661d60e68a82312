import { describe, expect, it } from 'vitest'
import { coatsOnWords } from '@/lib/format/coat-words'
import { formatDuration, formatReadAge } from '@/lib/format/duration'
import { stateWords } from '@/lib/format/state-words'
import { timePairWords } from '@/lib/format/time-pair'
import { formatKelvin, formatPercent, formatShare, formatTemperature } from '@/lib/format/units'
import { TREE_STATES } from '@/lib/trees/states'

const plain = (text: string) => text.replaceAll('\u00A0', ' ')
const MINUTE = 60_000

describe('formatDuration', () => {
  it.each([
    [0, '0 min'],
    [-5 * MINUTE, '0 min'],
    [35 * MINUTE + 59_000, '35 min'],
    [60 * MINUTE, '1 h'],
    [65 * MINUTE, '1 h 05 min'],
    [47 * 60 * MINUTE + 59 * MINUTE, '47 h 59 min'],
    [51 * 60 * MINUTE, '2 d 3 h'],
    [72 * 60 * MINUTE, '3 d'],
  ])('%i ms is %s', (length, words) => {
    expect(plain(formatDuration(length))).toBe(words)
  })

  it('tells the age of a reading', () => {
    expect(plain(formatReadAge(0, 30_000))).toBe('read just now')
    expect(plain(formatReadAge(0, 2 * MINUTE))).toBe('read 2 min ago')
  })
})

describe('units', () => {
  it('stand after a space that does not break', () => {
    expect(formatTemperature(21.84)).toBe('21.8\u00A0°C')
    expect(formatTemperature(-0.04)).toBe('0.0\u00A0°C')
    expect(formatTemperature(-3.25)).toBe('−3.2\u00A0°C')
    expect(formatPercent(57.6)).toBe('58\u00A0%')
    expect(formatShare(0.384)).toBe('38\u00A0%')
    expect(formatKelvin(5.44)).toBe('5.4\u00A0K')
    expect(formatKelvin(null)).toBe('–')
  })
})

describe('timePairWords', () => {
  const now = Date.parse('2026-10-13T14:10:00Z')
  const pair = (likely: string | null, safe: string | null) =>
    timePairWords({ likelyAt: likely ? Date.parse(likely) : null, safeAt: safe ? Date.parse(safe) : null }, now, 'Europe/London').text

  it('always says both times', () => {
    expect(pair('2026-10-13T14:35:00Z', '2026-10-13T15:20:00Z')).toBe('likely 15:35, safe 16:20')
  })

  it('says the day of each time that is not today', () => {
    expect(pair('2026-10-14T21:00:00Z', '2026-10-15T01:00:00Z')).toBe('likely Wed 22:00, safe Thu 02:00')
    expect(pair('2026-10-13T22:10:00Z', '2026-10-14T01:15:00Z')).toBe('likely 23:10, safe Wed 02:15')
  })

  it('keeps the hours apart over the change of the clocks', () => {
    expect(
      timePairWords(
        { likelyAt: Date.parse('2026-10-25T00:30:00Z'), safeAt: Date.parse('2026-10-25T01:45:00Z') },
        Date.parse('2026-10-24T20:00:00Z'),
        'Europe/London',
      ).text,
    ).toBe('likely Sun 01:30, safe Sun 01:45')
  })

  it('says so where the forecast does not reach', () => {
    expect(pair('2026-10-13T14:35:00Z', null)).toBe('likely 15:35, safe not in sight')
  })
})

describe('stateWords', () => {
  it('counts only while a tree waits for a hand', () => {
    expect(plain(stateWords('waiting', 0, 35 * MINUTE))).toBe('Waiting 35 min')
    expect(plain(stateWords('overdue', 0, 65 * MINUTE))).toBe('Overdue 1 h 05 min')
    expect(stateWords('drying', 0, 65 * MINUTE)).toBe('Drying')
    expect(stateWords('dried out', null, 0)).toBe('Dried out, look over')
  })

  it('has a word for every state, no two alike', () => {
    const words = TREE_STATES.map((state) => stateWords(state, null, 0))
    expect(new Set(words).size).toBe(TREE_STATES.length)
  })
})

describe('coatsOnWords', () => {
  it('counts what is on and what comes', () => {
    const coats = Array.from({ length: 8 })
    expect(coatsOnWords({ coatsOn: 5, coats, next: { number: 6 } })).toBe('5 on, dip 6 of 8')
    expect(coatsOnWords({ coatsOn: 8, coats, next: null })).toBe('8 of 8 on')
    // An extra coat may go on beyond the recipe.
    expect(coatsOnWords({ coatsOn: 8, coats, next: { number: 9 } })).toBe('8 on, dip 9 of 9')
  })
})
