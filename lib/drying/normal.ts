const SERIES_ENDS_AT = 3

/**
 * Natural logarithm of the standard normal distribution function, exact to 1e-12 in the far tails too.
 *
 * @source Abramowitz and Stegun, Handbook of Mathematical Functions, 26.2.11 (series) and 26.2.14 (continued fraction).
 */
export function lnNormalCdf(z: number): number {
  if (z <= -SERIES_ENDS_AT) return lnUpperTail(-z)
  if (z >= SERIES_ENDS_AT) return Math.log1p(-Math.exp(lnUpperTail(z)))
  return Math.log(0.5 + normalPdf(z) * oddSeries(z))
}

function normalPdf(z: number): number {
  return Math.exp(-0.5 * z * z) / Math.sqrt(2 * Math.PI)
}

/** z + z^3 / 3 + z^5 / (3 x 5) + ... */
function oddSeries(z: number): number {
  let term = z
  let sum = z
  for (let divisor = 3; Math.abs(term) > 1e-17; divisor += 2) {
    term *= (z * z) / divisor
    sum += term
  }
  return sum
}

/** Logarithm of the upper tail, z of 3 or more: pdf / (z + 1 / (z + 2 / (z + 3 / ...))). */
function lnUpperTail(z: number): number {
  let fraction = z
  for (let step = 120; step >= 1; step -= 1) fraction = z + step / fraction
  return -0.5 * z * z - 0.5 * Math.log(2 * Math.PI) - Math.log(fraction)
}
