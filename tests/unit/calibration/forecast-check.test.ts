import { describe, expect, it } from 'vitest'
import { acceptedNote, clockSentence, signedDuration } from '@/lib/calibration/calibration-words'
import { checkEach, checkForecasts } from '@/lib/calibration/forecast-check'
import { checkedCoat, type CheckedCoat } from '@/lib/calibration/left-out'
import { buildOutcome, HOUR, times } from '@/tests/unit/calibration/build-outcome'

/** Dry so many minutes after its likely time; P10 lies an hour before that, P90 an hour and a half after. */
function buildChecked(lateMinutes: number, by = 'maud'): CheckedCoat {
  const outcome = buildOutcome({ dippedBy: { id: by, name: by } })
  return checkedCoat({ ...outcome, dryAt: outcome.startedAt + 4 * HOUR + lateMinutes * 60_000 })!
}

describe('how well the times of coats held', () => {
  it('counts those between P10 and P90, the ends with them, and takes the middle of the errors', () => {
    const check = checkForecasts([-70, -60, 0, 30, 90, 91, 12].map((minutes) => buildChecked(minutes)))
    expect(check).toMatchObject({ count: 7, inside: 5, biasMinutes: 12, middleHalf: [-30, 60] })
  })

  it('knows no bias without a coat', () => {
    expect(checkForecasts([])).toEqual({ count: 0, inside: 0, biasMinutes: null, middleHalf: null })
  })

  it('is told for each group, the largest first', () => {
    const each = checkEach([buildChecked(5, 'oona'), buildChecked(10), buildChecked(20)], ({ outcome }) => outcome.dippedBy.id)
    expect(each.map(({ key, check }) => [key, check.count, check.biasMinutes])).toEqual([
      ['maud', 2, 15],
      ['oona', 1, 5],
    ])
  })
})

describe('how good the clock is, in words', () => {
  it('says counts, share and which way likely times were off', () => {
    expect(clockSentence({ count: 84, inside: 66, biasMinutes: 12, middleHalf: [0, 20] })).toBe(
      'Of 84 coats that were checked, 66 (79 %) came dry between P10 and P90; it should be near 80 %. Likely times were 12\u00A0min early in the middle.',
    )
    expect(clockSentence({ count: 10, inside: 8, biasMinutes: -75, middleHalf: null })).toMatch(
      /Likely times were 1\u00A0h 15\u00A0min late in the middle\.$/,
    )
    expect(clockSentence({ count: 10, inside: 8, biasMinutes: 0.2, middleHalf: null })).toMatch(/right in the middle\.$/)
  })

  it('says so where they are too few', () => {
    expect(clockSentence(checkForecasts(times(9, () => buildChecked(5))))).toBe(
      '9 coats were checked: too few to tell how good the clock is. Ten say something.',
    )
    expect(clockSentence(checkForecasts([]))).toBe('No coat tells yet how good the clock is.')
  })

  it('writes notes and signed times', () => {
    expect(
      acceptedNote([
        { number: 3, needBefore: 4, needAfter: 4.4, coatsAfter: 14 },
        { number: 4, needBefore: 4.16, needAfter: 4.16, coatsAfter: 5 },
      ]),
    ).toBe('Coat 3: 4 to 4.4 reference hours, by 14 coats. Coat 4: 4.16 reference hours confirmed, by 5 coats.')
    expect([signedDuration(65), signedDuration(-12.4), signedDuration(0.3)]).toEqual([
      '+1\u00A0h 05\u00A0min',
      '−12\u00A0min',
      '0\u00A0min',
    ])
  })
})
