import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { COAT_KINDS, RECESS_CLASSES, STUCCOS } from '@/lib/coats/vocabulary'
import { moistureRatio, pageK } from '@/lib/drying/moisture'
import { guardFor, needBand, needReferenceHours, sigma } from '@/lib/drying/need'
import { defaultReferenceHours } from '@/lib/drying/recipe-defaults'
import type { NeedInput } from '@/lib/drying/types'

const buildNeed = (overrides: Partial<NeedInput> = {}) =>
  needReferenceHours({
    recipeReferenceHours: 4,
    recipeStucco: 'medium',
    usedStucco: 'medium',
    spacing: 'open',
    recessClass: 'none',
    moistureRatioBelow: 0,
    treeTheta: 0,
    ...overrides,
  })

describe('needReferenceHours', () => {
  it.each(STUCCOS)("is the recipe's own hours when the recipe was followed with stucco %s", (stucco) => {
    expect(buildNeed({ recipeStucco: stucco, usedStucco: stucco })).toBe(4)
  })

  it.each<{ name: string; overrides: Partial<NeedInput>; expected: number }>([
    { name: 'coarse in place of fine', overrides: { recipeStucco: 'fine', usedStucco: 'coarse' }, expected: (4 * 1.15) / 0.9 },
    { name: 'none in place of coarse', overrides: { recipeStucco: 'coarse', usedStucco: 'none' }, expected: 4 / 1.15 },
    { name: 'a crowded tree', overrides: { spacing: 'crowded' }, expected: 5 },
    { name: 'a deep recess', overrides: { recessClass: 'deep recess' }, expected: 6.4 },
    { name: 'a closed core', overrides: { recessClass: 'closed core' }, expected: 10 },
    { name: 'a closed core without a duct', overrides: { recessClass: 'closed core, no duct' }, expected: 12 },
    { name: 'a coat below at moisture ratio 0.3', overrides: { moistureRatioBelow: 0.3 }, expected: 4.6 },
    { name: 'a tree that dries slowly', overrides: { treeTheta: 0.2469 }, expected: 5.12 },
  ])('is $expected for $name', ({ overrides, expected }) => {
    expect(buildNeed(overrides)).toBeCloseTo(expected, 3)
  })

  it.each<Partial<NeedInput>>([
    { recipeReferenceHours: 0 },
    { recipeReferenceHours: Number.NaN },
    { moistureRatioBelow: 1.01 },
    { moistureRatioBelow: -0.01 },
    { treeTheta: Number.NaN },
    { treeTheta: 2.1 },
  ])('refuses %o', (overrides) => {
    expect(() => buildNeed(overrides)).toThrow(RangeError)
  })
})

describe('needBand', () => {
  it('has P10 below P50 below P90', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 0.1, max: 50, noNaN: true }),
        fc.constantFrom(...RECESS_CLASSES),
        fc.boolean(),
        (need, recessClass, hasTyped) => {
          const { low, likely, high } = needBand(need, sigma({ recessClass, hasTyped }))
          expect(low).toBeLessThan(likely)
          expect(likely).toBeLessThan(high)
        },
      ),
    )
  })
})

describe('guardFor', () => {
  it.each(COAT_KINDS.flatMap((kind) => RECESS_CLASSES.map((recessClass) => ({ kind, recessClass }))))(
    'waits for the right time: $kind coat, recess $recessClass',
    ({ kind, recessClass }) => {
      const mustBeSafe = kind === 'face' || recessClass !== 'none'
      expect(guardFor({ kind, isLast: false, recessClass, recipeGuard: 'likely' })).toBe(mustBeSafe ? 'safe' : 'likely')
      expect(guardFor({ kind, isLast: true, recessClass, recipeGuard: 'likely' })).toBe('safe')
      expect(guardFor({ kind, isLast: false, recessClass, recipeGuard: 'safe' })).toBe('safe')
    },
  )
})

describe('defaultReferenceHours', () => {
  it('has the starter recipe: face 2.5 and 3.0, backup 4.0 rising by 4 %, core fill 10, seal 12', () => {
    expect([0, 1, 2].map((index) => defaultReferenceHours('face', index))).toEqual([2.5, 3, 3])
    expect([0, 1, 2].map((index) => defaultReferenceHours('backup', index))).toEqual([4, 4.16, expect.closeTo(4.3264, 10)])
    expect([defaultReferenceHours('core fill', 0), defaultReferenceHours('seal', 0)]).toEqual([10, 12])
  })
})

describe('moistureRatio', () => {
  const needs = fc.double({ min: 0.1, max: 50, noNaN: true })
  const targets = fc.double({ min: 0.01, max: 0.5, noNaN: true })
  const shares = fc.double({ min: 0, max: 2, noNaN: true })

  it('is 1 at the dip, the target at the need, and falls between', () => {
    fc.assert(
      fc.property(needs, targets, shares, (need, target, share) => {
        expect(moistureRatio(0, need, target)).toBe(1)
        expect(moistureRatio(need, need, target)).toBeCloseTo(target, 9)
        expect(moistureRatio(need * (share + 0.05), need, target)).toBeLessThan(moistureRatio(need * share, need, target))
      }),
    )
  })

  it('is undone by Page solved for the dose', () => {
    fc.assert(
      fc.property(needs, targets, fc.double({ min: 0.05, max: 1.5, noNaN: true }), (need, target, share) => {
        const ratio = moistureRatio(share * need, need, target)
        expect((-Math.log(ratio) / pageK(need, target)) ** (1 / 1.1)).toBeCloseTo(share * need, 6)
      }),
    )
  })

  it.each([
    [-1, 4, 0.1],
    [Number.NaN, 4, 0.1],
    [1, 0, 0.1],
    [1, 4, 0],
    [1, 4, 1],
  ])('refuses a dose of %d, a need of %d and a target of %d', (dose, need, target) => {
    expect(() => moistureRatio(dose, need, target)).toThrow(RangeError)
  })
})
