import { expect, it } from 'vitest'
import { learnMean } from '@/lib/calibration/proposals'

// Mean of a normal with known variances and a normal prior: precisions add (Gelman et al., Bayesian Data Analysis, 3rd ed., eq. 2.12).
// Worked out by hand: prior 1/0.20^2 = 25; five coats at 1/(0.08^2 + 0.15^2) = 34.602 each; 25 + 173.01 = 198.01, of which the root of the
// inverse is 0.07107; 173.01 x 0.12 / 198.01 = 0.10485. Tolerance: half of the last digit. The prior and the scatter are our own values.
it('five coats of 0.12 with 0.08 each give 0.10485 with 0.07107', () => {
  const learned = learnMean(
    0.2,
    Array.from({ length: 5 }, () => ({ mean: 0.12, sd: 0.08 })),
  )
  expect(Math.abs(learned.mean - 0.10485)).toBeLessThan(0.000005)
  expect(Math.abs(learned.sd - 0.07107)).toBeLessThan(0.000006)
})
