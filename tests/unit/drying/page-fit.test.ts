import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { doseAtRatio, fitPage, lnNeedSd, type PagePoint } from '@/lib/drying/page-fit'

const page = (dose: number, k: number, n: number) => Math.exp(-k * dose ** n)
const pointsOf = (ratios: readonly (readonly [dose: number, moistureRatio: number])[]): PagePoint[] =>
  ratios.map(([dose, moistureRatio]) => ({ dose, moistureRatio }))

/** Weighings of a coat that needs `need` reference hours to a tenth, when it has come to these ratios. */
const exact = (need: number, n: number, ratios: readonly number[]) => {
  const k = Math.log(10) / need ** n
  return { k, points: ratios.map((moistureRatio) => ({ dose: (-Math.log(moistureRatio) / k) ** (1 / n), moistureRatio })) }
}

const coat = fc.record({
  need: fc.double({ min: 0.5, max: 60, noNaN: true }),
  n: fc.double({ min: 0.6, max: 2.3, noNaN: true }),
})

describe('fitPage', () => {
  it('finds again what exact weighings were made of', () => {
    fc.assert(
      fc.property(coat, ({ need, n }) => {
        const { k, points } = exact(need, n, [0.9, 0.75, 0.5, 0.3, 0.15])
        const fit = fitPage(points)!
        expect(Math.abs(fit.n - n)).toBeLessThan(1e-5)
        expect(Math.abs(fit.k / k - 1)).toBeLessThan(1e-4)
        expect(Math.abs(doseAtRatio(fit, 0.1) / need - 1)).toBeLessThan(1e-5)
        expect(fit.sumOfSquares).toBeLessThan(1e-12)
      }),
      { numRuns: 20 },
    )
  })

  it('does not depend on the order of the weighings', () => {
    const rough = pointsOf([
      [0.5, 0.8],
      [1.5, 0.42],
      [2.5, 0.2],
      [3.5, 0.12],
    ])
    const expected = fitPage(rough)
    fc.assert(
      fc.property(fc.shuffledSubarray(rough, { minLength: rough.length }), (points) => {
        expect(fitPage(points)).toEqual(expected)
      }),
      { numRuns: 10 },
    )
  })

  it('is never worse than the curve that the weighings scatter about', () => {
    const noise = fc.array(fc.double({ min: -0.03, max: 0.03, noNaN: true }), { minLength: 5, maxLength: 5 })
    fc.assert(
      fc.property(coat, noise, ({ need, n }, errors) => {
        const { k, points } = exact(need, n, [0.9, 0.75, 0.5, 0.3, 0.15])
        const rough = points.map((point, index) => ({ dose: point.dose, moistureRatio: point.moistureRatio + errors[index]! }))
        const fit = fitPage(rough)
        fc.pre(fit !== null)
        const ofTruth = fit.points.reduce((sum, { dose, moistureRatio }) => sum + (moistureRatio - page(dose, k, n)) ** 2, 0)
        expect(fit.sumOfSquares).toBeLessThanOrEqual(ofTruth + 1e-12)
        expect(fit.n).toBeGreaterThan(0.5)
        expect(fit.n).toBeLessThan(2.5)
      }),
      { numRuns: 20 },
    )
  })

  it.each([
    { name: 'two weighings', points: [[0.5, 0.8] as const, [3, 0.2] as const] },
    { name: 'three of which one is all error', points: [[0.5, 0.8] as const, [3, 0.2] as const, [9, 0.019] as const] },
    { name: 'three of which one is at the dip', points: [[0, 0.97] as const, [0.5, 0.8] as const, [3, 0.2] as const] },
    { name: 'two doses', points: [[0.5, 0.8] as const, [3, 0.2] as const, [3, 0.21] as const] },
    { name: 'none that is still wet', points: [[1, 0.69] as const, [2, 0.4] as const, [3, 0.2] as const] },
    { name: 'none that is nearly dry', points: [[0.5, 0.8] as const, [1, 0.6] as const, [2, 0.36] as const] },
    { name: 'a coat that gains water', points: [[1, 0.3] as const, [2, 0.5] as const, [3, 0.8] as const] },
    { name: 'a coat that falls like a step', points: [[3, 0.97] as const, [3.1, 0.5] as const, [3.2, 0.03] as const] },
  ])('refuses $name', ({ points }) => {
    expect(fitPage(pointsOf(points))).toBeNull()
  })
})

describe('lnNeedSd', () => {
  const spread = exact(4, 1.1, [0.9, 0.7, 0.5, 0.3, 0.1]).points

  it('is the spread of ln(need) over many weighings with the stated error', () => {
    // Fixed errors with a standard deviation of 0.03, so that the figure is the same in each run.
    const errors = Array.from({ length: 100 }, (_, run) =>
      spread.map((_point, index) => 0.03 * Math.SQRT2 * Math.sin(1.7 + 12.9898 * (run * 5 + index) ** 1.3)),
    )
    const lnNeeds = errors.flatMap((run) => {
      const fit = fitPage(spread.map((point, index) => ({ ...point, moistureRatio: point.moistureRatio + run[index]! })))
      return fit ? [Math.log(doseAtRatio(fit, 0.2))] : []
    })
    const mean = lnNeeds.reduce((sum, value) => sum + value, 0) / lnNeeds.length
    const seen = Math.sqrt(lnNeeds.reduce((sum, value) => sum + (value - mean) ** 2, 0) / (lnNeeds.length - 1))
    const told = lnNeedSd(fitPage(spread)!, 0.2)
    expect(lnNeeds.length).toBeGreaterThan(95)
    expect(seen / told).toBeGreaterThan(0.75)
    expect(seen / told).toBeLessThan(1.33)
  })

  it('shrinks with more weighings and grows with their scatter, but never below its floor', () => {
    const once = fitPage(spread)!
    const often = fitPage(Array.from({ length: 4 }, () => spread).flat())!
    expect(lnNeedSd(often, 0.1)).toBeLessThan(lnNeedSd(once, 0.1))
    expect(lnNeedSd({ ...once, residualSd: 0.06 }, 0.1)).toBeCloseTo(2 * lnNeedSd(once, 0.1), 12)
    expect(lnNeedSd({ ...once, points: Array.from({ length: 400 }, () => spread).flat() }, 0.1)).toBe(0.03)
  })

  it('grows with the distance from the weighings', () => {
    const fit = fitPage(exact(4, 1.1, [0.8, 0.55, 0.34]).points)!
    expect(lnNeedSd(fit, 0.05)).toBeGreaterThan(lnNeedSd(fit, 0.3))
  })
})
