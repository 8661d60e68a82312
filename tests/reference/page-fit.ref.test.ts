import { describe, expect, it } from 'vitest'
import { doseAtRatio, fitPage } from '@/lib/drying/page-fit'
import { profileSearch } from '@/lib/drying/profile-search'

type Pairs = readonly (readonly [x: number, y: number])[]

const relativeError = (actual: number, expected: number) => Math.abs(actual / expected - 1)

/**
 * Least squares of y = a g(x, parameters) by the search that fits the weighings: `a` in closed form, the others on a log scale.
 */
function fitScaled(data: Pairs, g: (x: number, parameters: readonly number[]) => number, ranges: readonly [low: number, high: number][]) {
  const at = (lnParameters: readonly number[]) => {
    const parameters = lnParameters.map(Math.exp)
    const shapes = data.map(([x]) => g(x, parameters))
    const scale = data.reduce((sum, [, y], index) => sum + y * shapes[index]!, 0) / shapes.reduce((sum, shape) => sum + shape ** 2, 0)
    return { scale, parameters, sum: data.reduce((sum, [, y], index) => sum + (y - scale * shapes[index]!) ** 2, 0) }
  }
  const found = profileSearch(
    (lnParameters) => at(lnParameters).sum,
    ranges.map(([low, high]) => ({ low: Math.log(low), high: Math.log(high) })),
  )
  return at(found.parameters)
}

// Source: NIST Statistical Reference Datasets, nonlinear regression, itl.nist.gov/div898/strd/nls: data and certified values.
describe('profileSearch on the certified sets of NIST', () => {
  // y = b1 (1 - exp(-b2 x)), 14 observations, lower difficulty. Tolerance 1e-6 relative.
  it('fits Misra1a', () => {
    const data: Pairs = [
      [77.6, 10.07],
      [114.9, 14.73],
      [141.1, 17.94],
      [190.8, 23.93],
      [239.9, 29.61],
      [289, 35.18],
      [332.8, 40.02],
      [378.4, 44.82],
      [434.8, 50.76],
      [477.3, 55.05],
      [536.8, 61.01],
      [593.1, 66.4],
      [689.1, 75.47],
      [760, 81.78],
    ]
    const fit = fitScaled(data, (x, [b2]) => 1 - Math.exp(-b2! * x), [[1e-6, 1]])
    expect(relativeError(fit.scale, 2.3894212918e2)).toBeLessThan(1e-6)
    expect(relativeError(fit.parameters[0]!, 5.5015643181e-4)).toBeLessThan(1e-6)
    expect(relativeError(fit.sum, 1.2455138894e-1)).toBeLessThan(1e-9)
    expect(relativeError(Math.sqrt(fit.sum / 12), 1.018787633e-1)).toBeLessThan(1e-9)
  })

  // The same model, 6 observations, higher difficulty: from NIST's first start many solvers overflow. Tolerance 1e-6 relative.
  it('fits BoxBOD', () => {
    const data: Pairs = [
      [1, 109],
      [2, 149],
      [3, 149],
      [5, 191],
      [7, 213],
      [10, 224],
    ]
    const fit = fitScaled(data, (x, [b2]) => 1 - Math.exp(-b2! * x), [[1e-3, 1e2]])
    expect(relativeError(fit.scale, 2.1380940889e2)).toBeLessThan(1e-6)
    expect(relativeError(fit.parameters[0]!, 5.4723748542e-1)).toBeLessThan(1e-6)
    expect(relativeError(fit.sum, 1.1680088766e3)).toBeLessThan(1e-9)
    expect(relativeError(Math.sqrt(fit.sum / 4), 1.7088072423e1)).toBeLessThan(1e-9)
  })

  // y = exp(-b1 x) / (b2 + b3 x), 54 observations, lower difficulty: 1 / b2 is the scale, b3 / b2 the second parameter of the search.
  // Tolerance 1e-5 relative.
  it('fits Chwirut2', () => {
    const data: Pairs = [
      [0.5, 92.9],
      [1, 57.1],
      [1.75, 31.05],
      [3.75, 11.5875],
      [5.75, 8.025],
      [0.875, 63.6],
      [2.25, 21.4],
      [3.25, 14.25],
      [5.25, 8.475],
      [0.75, 63.8],
      [1.75, 26.8],
      [2.75, 16.4625],
      [4.75, 7.125],
      [0.625, 67.3],
      [1.25, 41.0],
      [2.25, 21.15],
      [4.25, 8.175],
      [0.5, 81.5],
      [3, 13.12],
      [0.75, 59.9],
      [3, 14.62],
      [1.5, 32.9],
      [6, 5.44],
      [3, 12.56],
      [6, 5.44],
      [1.5, 32.0],
      [3, 13.95],
      [0.5, 75.8],
      [2, 20.0],
      [4, 10.42],
      [0.75, 59.5],
      [2, 21.67],
      [5, 8.55],
      [0.75, 62.0],
      [2.25, 20.2],
      [3.75, 7.76],
      [5.75, 3.75],
      [3, 11.81],
      [0.75, 54.7],
      [2.5, 23.7],
      [4, 11.55],
      [0.75, 61.3],
      [2.5, 17.7],
      [4, 8.74],
      [0.75, 59.2],
      [2.5, 16.3],
      [4, 8.62],
      [0.5, 81.0],
      [6, 4.87],
      [3, 14.62],
      [0.5, 81.7],
      [2.75, 17.17],
      [0.5, 81.3],
      [1.75, 28.9],
    ]
    const fit = fitScaled(data, (x, [b1, ratio]) => Math.exp(-b1! * x) / (1 + ratio! * x), [
      [1e-3, 1e1],
      [1e-2, 1e2],
    ])
    const [b1, ratio] = fit.parameters
    expect(relativeError(b1!, 1.6657666537e-1)).toBeLessThan(1e-5)
    expect(relativeError(1 / fit.scale, 5.1653291286e-3)).toBeLessThan(1e-5)
    expect(relativeError(ratio! / fit.scale, 1.2150007096e-2)).toBeLessThan(1e-5)
    expect(relativeError(fit.sum, 5.1304802941e2)).toBeLessThan(1e-9)
  })
})

const HOURS = [0.5, 1, 1.5, 2, 3, 4]
const weighings = (ratios: readonly number[]) => ratios.map((moistureRatio, index) => ({ dose: HOURS[index]!, moistureRatio }))

// Source: constructed sets of our own; the least squares were computed with SciPy and by an independent implementation.
describe('fitPage', () => {
  // k 0.6, n 1.1, printed to four places.
  it('finds k and n of an exact set', () => {
    const fit = fitPage(weighings([0.7559, 0.5488, 0.3917, 0.2763, 0.1341, 0.0635]))!
    expect(Math.abs(fit.k - 0.6)).toBeLessThan(1e-4)
    expect(Math.abs(fit.n - 1.1)).toBeLessThan(2e-4)
  })

  // Tolerance: half the last printed digit.
  it('finds the least squares of a rough set', () => {
    const fit = fitPage(weighings([0.72, 0.55, 0.39, 0.27, 0.13, 0.06]))!
    expect(Math.abs(fit.k - 0.62684)).toBeLessThan(1e-6)
    expect(Math.abs(fit.n - 1.053786)).toBeLessThan(1e-6)
    expect(Math.abs(fit.sumOfSquares - 7.70062e-4)).toBeLessThan(6e-10)
    expect(Math.abs(fit.residualSd - Math.sqrt(7.70062e-4 / 4))).toBeLessThan(1e-8)
  })
})

// Source: closed forms of Page 1949: half dry at (ln 2 / k)^(1/n), at 5 % at (ln 20 / k)^(1/n). Tolerance 1e-9 relative.
describe('doseAtRatio', () => {
  it.each([
    { k: 0.6, n: 1.1 },
    { k: 0.50113, n: 1.1 },
    { k: 1.3, n: 0.8 },
    { k: 0.05, n: 1 },
  ])('has the half time and the 5 % time of k $k and n $n', ({ k, n }) => {
    expect(relativeError(doseAtRatio({ k, n }, 0.5), (Math.LN2 / k) ** (1 / n))).toBeLessThan(1e-9)
    expect(relativeError(doseAtRatio({ k, n }, 0.05), (Math.log(20) / k) ** (1 / n))).toBeLessThan(1e-9)
  })
})
