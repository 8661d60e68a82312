import { describe, expect, it } from 'vitest'
import {
  observeMoisture,
  observeSurface,
  observeVerdict,
  surfaceCooling,
  thetaPosterior,
  withoutPrior,
  type Observation,
  type Theta,
} from '@/lib/drying/evidence'
import { moistureRatio } from '@/lib/drying/moisture'
import { needBand } from '@/lib/drying/need'
import { lnNormalCdf } from '@/lib/drying/normal'

// Source of the whole file unless said otherwise: our own model, with constructed cases; the numbers were computed by closed forms, by a
// numeric quadrature and by an independent implementation, which agree. Tolerance: half the last printed digit.

const PRIOR: Theta = { mean: 0, sd: 0.25 }
const NEED = 4
const off = (actual: number, expected: number) => Math.abs(actual - expected)

const verdictAt = (dose: number, verdict: 'dry' | 'not yet'): Observation => observeVerdict({ dose, need: NEED }, verdict)!
const needOf = ({ mean, sd }: Theta) => needBand(NEED * Math.exp(mean), sd)

describe('a weighing', () => {
  const coat = { dose: 2, need: NEED, moistureTarget: 0.1 }
  const seen = observeMoisture(coat, 0.45)!

  it('of 0.45 where the clock said 0.3416 speaks for a theta of 0.2696 +- 0.0759', () => {
    expect(off(moistureRatio(2, NEED, 0.1), 0.3416)).toBeLessThan(6e-5)
    expect(seen.kind).toBe('value')
    if (seen.kind !== 'value') return
    expect(off(seen.theta, 0.2696)).toBeLessThan(6e-5)
    expect(off(Math.exp(seen.theta), 1.3095)).toBeLessThan(6e-5)
    expect(off(seen.sd, 0.0759)).toBeLessThan(6e-5)
  })

  it('leaves 0.2469 +- 0.0726: a need of 5.120, from 4.665 to 5.619', () => {
    const posterior = thetaPosterior(PRIOR, [seen])
    expect(off(posterior.mean, 0.2469)).toBeLessThan(6e-5)
    expect(off(posterior.sd, 0.0726)).toBeLessThan(6e-5)
    const { likely, low, high } = needOf(posterior)
    expect(off(likely, 5.12)).toBeLessThan(6e-4)
    expect(off(low, 4.665)).toBeLessThan(6e-4)
    expect(off(high, 5.619)).toBeLessThan(6e-4)
  })

  it('weighs as Gauss on Gauss does: the weight is 0.9156', () => {
    if (seen.kind !== 'value') return
    const weight = PRIOR.sd ** 2 / (PRIOR.sd ** 2 + seen.sd ** 2)
    expect(off(weight, 0.9156)).toBeLessThan(6e-5)
    const posterior = thetaPosterior(PRIOR, [seen])
    expect(off(posterior.mean, weight * seen.theta)).toBeLessThan(1e-6)
    expect(off(posterior.sd, PRIOR.sd * Math.sqrt(1 - weight))).toBeLessThan(1e-6)
  })

  it('of the moisture that the clock says moves nothing', () => {
    const posterior = thetaPosterior(PRIOR, [observeMoisture(coat, moistureRatio(2, NEED, 0.1))!])
    expect(Math.abs(posterior.mean)).toBeLessThan(1e-9)
  })
})

describe('felt dry, or not yet', () => {
  it.each([
    { verdict: 'dry' as const, dose: 4.6, mean: -0.1114, sd: 0.1965, likely: 3.578, high: 4.603 },
    { verdict: 'dry' as const, dose: 3, mean: -0.3247, sd: 0.1605, likely: 2.891, high: 3.551 },
    { verdict: 'not yet' as const, dose: 4.6, mean: 0.2414, sd: 0.1704, likely: 5.092, high: 6.335 },
    { verdict: 'not yet' as const, dose: 5.5, mean: 0.3429, sd: 0.1588, likely: 5.636, high: 6.908 },
  ])('$verdict at $dose of a need of 4: $mean +- $sd', ({ verdict, dose, mean, sd, likely, high }) => {
    const posterior = thetaPosterior(PRIOR, [verdictAt(dose, verdict)])
    expect(off(posterior.mean, mean)).toBeLessThan(6e-5)
    expect(off(posterior.sd, sd)).toBeLessThan(6e-5)
    expect(off(needOf(posterior).likely, likely)).toBeLessThan(6e-4)
    // The printed ones come from a mean and a spread of four decimals.
    expect(off(needOf(posterior).high, high)).toBeLessThan(1.1e-3)
  })

  // Source: moments of a Gauss cut off by a probit, closed form: with a = ln(dose / need), S^2 = sd^2 + scatter^2, z = a / S.
  it.each([
    [2, 'dry'],
    [3.2, 'dry'],
    [4, 'dry'],
    [6, 'dry'],
    [2.5, 'not yet'],
    [4, 'not yet'],
    [7, 'not yet'],
  ] as const)('by the grid, at %d %s, is what the closed form says to 1e-4', (dose, verdict) => {
    const variance = PRIOR.sd ** 2 + 0.15 ** 2
    const z = Math.log(dose / NEED) / Math.sqrt(variance)
    const side = verdict === 'dry' ? 1 : -1
    const density = Math.exp(-0.5 * z * z) / Math.sqrt(2 * Math.PI)
    const hazard = density / Math.exp(lnNormalCdf(side * z))
    const mean = (-side * PRIOR.sd ** 2 * hazard) / Math.sqrt(variance)
    const left = PRIOR.sd ** 2 - (PRIOR.sd ** 4 / variance) * hazard * (hazard + side * z)
    const posterior = thetaPosterior(PRIOR, [verdictAt(dose, verdict)])
    expect(off(posterior.mean, mean)).toBeLessThan(1e-4)
    expect(off(posterior.sd, Math.sqrt(left))).toBeLessThan(1e-4)
  })
})

describe('several pieces of evidence', () => {
  const notYet = verdictAt(3.5, 'not yet')
  const dry = verdictAt(4.6, 'dry')
  const weighed: Observation = { kind: 'value', theta: 0.1, sd: 0.08 }

  it('not yet at 3.5 and dry at 4.6 leave 0.0021 +- 0.1397, a need from 3.351 to 4.795', () => {
    for (const order of [
      [notYet, dry],
      [dry, notYet],
    ]) {
      const posterior = thetaPosterior(PRIOR, order)
      expect(off(posterior.mean, 0.0021)).toBeLessThan(6e-5)
      expect(off(posterior.sd, 0.1397)).toBeLessThan(6e-5)
      const { likely, low, high } = needOf(posterior)
      expect(off(low, 3.351)).toBeLessThan(1.1e-3)
      expect(off(likely, 4.009)).toBeLessThan(1.1e-3)
      expect(off(high, 4.795)).toBeLessThan(1.1e-3)
    }
  })

  it('and a weighing of 0.10 +- 0.08 makes them 0.0759 +- 0.0694', () => {
    const posterior = thetaPosterior(PRIOR, [notYet, dry, weighed])
    expect(off(posterior.mean, 0.0759)).toBeLessThan(6e-5)
    expect(off(posterior.sd, 0.0694)).toBeLessThan(6e-5)
  })

  // Tolerance 4e-4 reference hours: what 401 points cost against 20,001.
  it('are what a fifty times finer grid makes of them', () => {
    const points = 20_001
    const lnDensity = (theta: number) =>
      -0.5 * (theta / PRIOR.sd) ** 2 +
      lnNormalCdf(-(Math.log(3.5 / NEED) - theta) / 0.15) +
      lnNormalCdf((Math.log(4.6 / NEED) - theta) / 0.15) -
      0.5 * ((theta - 0.1) / 0.08) ** 2
    const thetas = Array.from({ length: points }, (_, index) => -3 + (6 * index) / (points - 1))
    const weights = thetas.map((theta) => Math.exp(lnDensity(theta)))
    const total = weights.reduce((sum, weight) => sum + weight, 0)
    const mean = thetas.reduce((sum, theta, index) => sum + theta * weights[index]!, 0) / total
    const variance = thetas.reduce((sum, theta, index) => sum + (theta - mean) ** 2 * weights[index]!, 0) / total
    const fine = needOf({ mean, sd: Math.sqrt(variance) })
    const posterior = needOf(thetaPosterior(PRIOR, [notYet, dry, weighed]))
    for (const bound of ['low', 'likely', 'high'] as const) expect(off(posterior[bound], fine[bound])).toBeLessThan(4e-4)
  })

  it('say by themselves what they add to the prior', () => {
    const alone = withoutPrior(PRIOR, thetaPosterior(PRIOR, [weighed]))!
    expect(off(alone.mean, 0.1)).toBeLessThan(1e-6)
    expect(off(alone.sd, 0.08)).toBeLessThan(1e-6)
    expect(withoutPrior(PRIOR, PRIOR)).toBeNull()
  })
})

// A surface at 19.4 degC in the reference room; wet bulb from ASHRAE 2017 ch. 1 by psychrolib, hence 1e-4 on the share.
describe('the temperature of a surface', () => {
  const air = { airTempC: 21, relHumidityPct: 50 }
  const coat = { dose: 3, need: NEED, moistureTarget: 0.1 }
  const at = (surfaceTempC: number) => observeSurface(coat, surfaceCooling(surfaceTempC, air, 101_325))

  it('of 19.4 degC has a quarter of the cooling left, a moisture ratio of 0.11', () => {
    const cooling = surfaceCooling(19.4, air, 101_325)
    expect(off(cooling.share, 0.2502)).toBeLessThan(1.5e-4)
    const seen = observeSurface(coat, cooling)
    const weighed = observeMoisture(coat, 0.45 * cooling.share)
    expect(seen).toMatchObject({ kind: 'value', theta: weighed!.kind === 'value' ? weighed!.theta : NaN })
    expect(off(0.45 * cooling.share, 0.11)).toBeLessThan(3e-3)
  })

  it('is dry back at room temperature, not yet at the wet bulb, and says nothing in damp air', () => {
    expect(at(20.4)).toMatchObject({ kind: 'dry', scatter: 0.1 })
    expect(at(14.6)).toMatchObject({ kind: 'not yet', scatter: 0.15 })
    expect(observeSurface(coat, surfaceCooling(19, { airTempC: 20, relHumidityPct: 80 }, 101_325))).toBeNull()
  })
})
