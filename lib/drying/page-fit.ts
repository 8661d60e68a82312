import { assertWithin } from '@/lib/drying/guards'
import { profileSearch } from '@/lib/drying/profile-search'

/** A weighing of a coat: its dose in reference hours and the share of its water that was left. */
export type PagePoint = { dose: number; moistureRatio: number }

/** Page's MR = exp(-k D^n) through weighings of one coat; D in reference hours. */
export type PageFit = {
  k: number
  n: number
  sumOfSquares: number
  /** Root of the sum of squares over (points - 2): how far the weighings scatter about the curve. */
  residualSd: number
  /** The weighings that were used, by dose. */
  points: readonly PagePoint[]
}

/** Beyond these a weighing is all error: ln(-ln MR) runs away at both ends. */
const LEAST_RATIO = 0.02
const GREATEST_RATIO = 0.98

const FEWEST_POINTS = 3

/** Every exponent that a drying coat has been seen with lies well within. Our own bounds. */
const EXPONENT = { low: 0.5, high: 2.5 }

/**
 * The curve turns about MR 0.37 when n changes, so n shows only where weighings lie well to both sides of it. Our own rule.
 */
const WET_END = 0.7
const DRY_END = 0.35

/** Scatter of one weighing's moisture ratio. Three points may lie on a curve by chance; they are never believed beyond this. Our own value. */
const WEIGHING_SD = 0.03

/** A perfect set of weighings still says no more than this of ln(need): the dose behind them is not exact. Our own value. */
const LEAST_LN_NEED_SD = 0.03

/**
 * Page's k and n by least squares on the moisture ratio itself, from three or more weighings of one coat, in any order.
 *
 * Null where fewer than three usable weighings at different doses are left (0.02 < MR < 0.98, dose above 0), where they do not reach
 * from 0.7 to 0.35, and where the best n lies at the end of its range of 0.5 to 2.5: those weighings are not of a drying coat. One or
 * two weighings still move the scale of the need at a fixed n.
 *
 * @source Page 1949; least squares by `profileSearch`.
 */
export function fitPage(weighings: readonly PagePoint[]): PageFit | null {
  const points = weighings
    .filter(({ dose, moistureRatio }) => dose > 0 && moistureRatio > LEAST_RATIO && moistureRatio < GREATEST_RATIO)
    .toSorted((a, b) => a.dose - b.dose || a.moistureRatio - b.moistureRatio)
  const doses = new Set(points.map((point) => point.dose))
  const ratios = points.map((point) => point.moistureRatio)
  if (doses.size < FEWEST_POINTS || Math.max(...ratios) < WET_END || Math.min(...ratios) > DRY_END) return null

  // Searched are n and the dose at which MR is 1/e: of the two, unlike of k and n, neither says much of the other.
  const scale = { low: Math.log(points[0]!.dose / 10), high: Math.log(points.at(-1)!.dose * 10) }
  const sumAt = (n: number, lnScale: number) =>
    points.reduce((sum, { dose, moistureRatio }) => sum + (moistureRatio - Math.exp(-((dose / Math.exp(lnScale)) ** n))) ** 2, 0)
  const found = profileSearch(([n, lnScale]) => sumAt(n!, lnScale!), [EXPONENT, scale])
  const n = found.parameters[0]!
  const lnScale = found.parameters[1]!
  if (n - EXPONENT.low < 1e-6 || EXPONENT.high - n < 1e-6) return null
  return {
    k: Math.exp(-n * lnScale),
    n,
    sumOfSquares: found.cost,
    residualSd: Math.sqrt(found.cost / (points.length - 2)),
    points,
  }
}

/**
 * Dose at which a fitted coat comes to a moisture ratio, reference hours: (-ln MR / k)^(1/n).
 *
 * @throws {RangeError} if the ratio is not between 0 and 1.
 * @source closed form of Page 1949.
 */
export function doseAtRatio({ k, n }: Pick<PageFit, 'k' | 'n'>, moistureRatio: number): number {
  assertWithin('Moisture ratio', moistureRatio, 1e-6, 1 - 1e-6)
  return (-Math.log(moistureRatio) / k) ** (1 / n)
}

/**
 * Standard deviation of ln(need) for a moisture target, from the curvature of the fit: the scatter of the weighings, 0.03 at the
 * least, carried through the derivatives of Page by the rule of propagation; itself 0.03 at the least.
 *
 * @throws {RangeError} if the target is not between 0 and 1.
 * @source linear propagation of a least-squares covariance, e.g. NIST/SEMATECH e-Handbook, sec. 4.4.
 */
export function lnNeedSd({ k, n, residualSd, points }: PageFit, moistureTarget: number): number {
  assertWithin('Moisture target', moistureTarget, 1e-6, 1 - 1e-6)
  const lnScale = -Math.log(k) / n
  // Normal matrix of (n, ln scale). With u = (D / scale)^n: dMR/dn = -u MR ln(D / scale), dMR/d(ln scale) = n u MR.
  let [nn, ns, ss] = [0, 0, 0]
  for (const { dose } of points) {
    const u = k * dose ** n
    const byScale = n * u * Math.exp(-u)
    const byExponent = (-byScale / n) * (Math.log(dose) - lnScale)
    nn += byExponent * byExponent
    ns += byExponent * byScale
    ss += byScale * byScale
  }
  // ln(need) = ln(scale) + ln(-ln target) / n.
  const slope = -Math.log(-Math.log(moistureTarget)) / n ** 2
  const variance = (nn - 2 * slope * ns + slope ** 2 * ss) / (nn * ss - ns ** 2)
  return Math.max(LEAST_LN_NEED_SD, Math.max(WEIGHING_SD, residualSd) * Math.sqrt(variance))
}
