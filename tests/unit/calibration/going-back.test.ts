import { expect, it } from 'vitest'
import { acceptCoatsInput, readTickedCoats } from '@/lib/calibration/calibration-input'
import { canGoBack, type CalibrationRow } from '@/lib/calibration/going-back'
import { buildClock } from '@/tests/unit/calibration/build-outcome'

const buildRow = (id: string, figureBefore: number, figureAfter: number, overrides: Partial<CalibrationRow> = {}): CalibrationRow => ({
  id,
  scope: 'place',
  recipeId: null,
  coatNumber: null,
  placeId: 'rack',
  recessClass: null,
  figureBefore,
  figureAfter,
  spreadBefore: null,
  spreadAfter: null,
  coatsBefore: null,
  coatsAfter: 6,
  goesBackOn: null,
  ...overrides,
})
const clockAt = (factor: number) => buildClock({ airFactors: new Map([['rack', factor]]) })
// Newest first.
const twice = [buildRow('second', 0.9, 0.8), buildRow('first', 1, 0.9)]

it('the newest step of each figure can be gone back on, and after it the one before', () => {
  expect([...canGoBack(twice, clockAt(0.8))]).toEqual(['second'])
  expect([...canGoBack([buildRow('back', 0.8, 0.9, { goesBackOn: 'second' }), ...twice], clockAt(0.9))]).toEqual(['first'])
})

it('none whose figure was changed by hand since', () => {
  expect([...canGoBack(twice, clockAt(1))]).toEqual([])
})

it('a ticked coat is read with the need that was shown, once', () => {
  const input = (ticked: string[]) =>
    acceptCoatsInput.safeParse({
      recipeId: '018f0000-0000-7000-8000-000000000000',
      follows: '2',
      coats: readTickedCoats(ticked),
      isMovingTrees: false,
    })
  expect(input(['3 4.42', '4 4.16']).data?.coats).toEqual([
    { number: 3, needReferenceHours: 4.42 },
    { number: 4, needReferenceHours: 4.16 },
  ])
  expect(input(['3 4.42', '3 4.42']).success).toBe(false)
  expect(input(['3']).success).toBe(false)
  expect(input([]).success).toBe(false)
})
