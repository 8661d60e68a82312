import { lnNormalCdf } from '@/lib/drying/normal'
import { wetBulbDepressionK } from '@/lib/drying/room-factor'
import { DEFAULT_PAGE_EXPONENT } from '@/lib/drying/moisture'
import type { Air } from '@/lib/drying/types'

/** How far a shell's need lies from the clock's, ln(true need / need): the mean and the spread of what is believed. */
export type Theta = { mean: number; sd: number }

/**
 * What one look, touch, weighing or temperature says of theta.
 *
 * - value: theta itself, with its error.
 * - dry, not yet: on which side of the need the dose lies, by somebody whose word scatters; `lnDoseOverNeed` is ln(dose / need).
 */
export type Observation =
  | { kind: 'value'; theta: number; sd: number }
  | { kind: 'dry' | 'not yet'; lnDoseOverNeed: number; scatter: number }

/** Scatter of a touch or of an indicating binder's colour, ln scale. Our own starting value, to be calibrated. */
export const TOUCH_SCATTER = 0.15
/** Scatter of 'dry' by two weighings that stay the same, or by a surface that is back at room temperature. Our own starting value. */
export const MEASURED_DRY_SCATTER = 0.1
/** Error of a moisture ratio by weight, where the coat's own water is known. Our own starting value. */
export const WEIGHED_MOISTURE_SIGMA = 0.03

const GRID_POINTS = 401
const GRID_END = 1.5

/**
 * What is believed of theta after some observations: the prior times every likelihood, on a fixed grid of 401 points from -1.5 to 1.5.
 * No order of the observations can matter, as it would where each moves the one before.
 *
 * @returns mean and spread; the prior where there are no observations.
 * @source Bayes' rule by the trapezoid rule; the prior and the scatters are ours.
 * @example thetaPosterior({ mean: 0, sd: 0.25 }, [{ kind: 'value', theta: 0.2696, sd: 0.0759 }]) // mean 0.247, sd 0.073
 */
export function thetaPosterior(prior: Theta, observations: readonly Observation[]): Theta {
  if (observations.length === 0) return prior
  const thetas = Array.from({ length: GRID_POINTS }, (_, index) => -GRID_END + (2 * GRID_END * index) / (GRID_POINTS - 1))
  const logs = thetas.map((theta) => observations.reduce((sum, seen) => sum + lnLikelihood(seen, theta), lnGauss(theta, prior)))
  const highest = Math.max(...logs)
  const weights = logs.map((log, index) => Math.exp(log - highest) * (index === 0 || index === GRID_POINTS - 1 ? 0.5 : 1))
  const total = weights.reduce((sum, weight) => sum + weight, 0)
  const mean = thetas.reduce((sum, theta, index) => sum + theta * weights[index]!, 0) / total
  const variance = thetas.reduce((sum, theta, index) => sum + (theta - mean) ** 2 * weights[index]!, 0) / total
  return { mean, sd: Math.sqrt(variance) }
}

const lnGauss = (value: number, { mean, sd }: Theta): number => -0.5 * ((value - mean) / sd) ** 2

function lnLikelihood(seen: Observation, theta: number): number {
  if (seen.kind === 'value') return lnGauss(theta, { mean: seen.theta, sd: seen.sd })
  const z = (seen.lnDoseOverNeed - theta) / seen.scatter
  return lnNormalCdf(seen.kind === 'dry' ? z : -z)
}

/**
 * What the observations alone say, without the prior: the Gauss that turns the one into the other. Finished coats are learned from by
 * this, so that a starting value does not vouch for itself.
 *
 * @returns null where they say next to nothing.
 */
export function withoutPrior(prior: Theta, posterior: Theta): Theta | null {
  const precision = 1 / posterior.sd ** 2 - 1 / prior.sd ** 2
  if (!(precision > 1e-6)) return null
  return { mean: (posterior.mean / posterior.sd ** 2 - prior.mean / prior.sd ** 2) / precision, sd: Math.sqrt(1 / precision) }
}

export type CoatAtDose = {
  /** Dose so far and need without theta, reference hours. */
  dose: number
  need: number
  moistureTarget: number
  pageExponent?: number
}

/**
 * A moisture ratio by weight: theta = ln( dose / need x (ln 1/MR* / -ln MR)^(1/n) ), with the error that the scale leaves.
 *
 * @param sigma error of the moisture ratio itself, 0.03 where the coat's water is known.
 * @returns null before there is any dose, and where the coat is as wet or as dry as a scale can tell.
 * @source Page 1949 solved for the time scale; the errors are ours.
 */
export function observeMoisture(coat: CoatAtDose, moistureRatio: number, sigma: number = WEIGHED_MOISTURE_SIGMA): Observation | null {
  const { dose, need, moistureTarget, pageExponent: n = DEFAULT_PAGE_EXPONENT } = coat
  if (!(dose > 0) || !(moistureRatio > 0.01 && moistureRatio < 0.99)) return null
  const lnWater = -Math.log(moistureRatio)
  return {
    kind: 'value',
    theta: Math.log((dose / need) * (-Math.log(moistureTarget) / lnWater) ** (1 / n)),
    sd: sigma / (n * moistureRatio * lnWater),
  }
}

/** 'Felt dry' or 'not yet' at a dose; null before there is any. */
export function observeVerdict(
  { dose, need }: Pick<CoatAtDose, 'dose' | 'need'>,
  verdict: 'dry' | 'not yet',
  scatter: number = TOUCH_SCATTER,
): Observation | null {
  return dose > 0 ? { kind: verdict, lnDoseOverNeed: Math.log(dose / need), scatter } : null
}

/** A wet surface cools so little in this air that a thermometer cannot tell it from a dry one, K. Our own starting value. */
export const LEAST_DEPRESSION_K = 3
/** Error of a surface thermometer against the air, K. Infrared, emissivity 0.93 to 0.95. Common practice, no source. */
const SURFACE_ERROR_K = 0.5
/** Moisture ratio at which the surface begins to warm. Our own starting value. */
const CRITICAL_MOISTURE = 0.45
const CRITICAL_MOISTURE_ERROR = 0.05
const STILL_WET_SHARE = 0.9
const RECOVERED_SHARE = 0.1
const RECOVERED_WITHIN_K = 0.7

/** How much of a freely wet surface's cooling is left, 1 wet to 0 dry; `depressionK` is what a wet one would cool by. */
export type SurfaceCooling = { share: number; depressionK: number }

/**
 * The cooling of a surface: (T air - T surface) / (T air - T wet bulb). The heat that reaches it drives water off, so it is also the
 * drying rate against that of a freely wet coat.
 *
 * @throws {RangeError} outside -10 to 60 degC, 0 to 105 % RH, 50 to 110 kPa.
 * @source heat balance of a drying surface, e.g. Geankoplis, Transport Processes and Unit Operations, sec. 9.6.
 */
export function surfaceCooling(surfaceTempC: number, air: Air, pressurePa: number): SurfaceCooling {
  const depressionK = wetBulbDepressionK(air, pressurePa)
  return { share: depressionK > 0 ? (air.airTempC - surfaceTempC) / depressionK : 0, depressionK }
}

/**
 * A surface's temperature as evidence: as cold as a wet one is 'not yet', back at room temperature is 'dry' with a small scatter,
 * between the two it gives the moisture ratio, MR = 0.45 x share in a linear falling period.
 *
 * @returns null where the wet bulb lies less than 3 K under the room: then nothing can be told.
 * @source the falling rate is linear in the moisture below the critical one (Geankoplis, sec. 9.7); 0.45 and the limits are ours.
 */
export function observeSurface(coat: CoatAtDose, { share, depressionK }: SurfaceCooling): Observation | null {
  if (depressionK < LEAST_DEPRESSION_K) return null
  if (share >= STILL_WET_SHARE) return observeVerdict(coat, 'not yet')
  if (share < RECOVERED_SHARE && share * depressionK <= RECOVERED_WITHIN_K) return observeVerdict(coat, 'dry', MEASURED_DRY_SCATTER)
  const sigma = Math.hypot((CRITICAL_MOISTURE * SURFACE_ERROR_K) / depressionK, CRITICAL_MOISTURE_ERROR)
  return observeMoisture(coat, Math.max(0.02, CRITICAL_MOISTURE * share), sigma)
}

/** Scatter between finished coats of one recipe, ln scale, of which half the variance is the tree's. Our own starting values. */
export const COAT_SCATTER = 0.15
const OWN_TO_THE_COAT = COAT_SCATTER ** 2 / 2

/** What a tree's coats share: the recipe's error and the tree's own way of drying. */
export type SharedTheta = { mean: number; variance: number }

/** Before anything is known of a tree: all of the spread but what each coat has of its own. */
export const sharedBefore = (spread: number): SharedTheta => ({ mean: 0, variance: Math.max(0, spread ** 2 - OWN_TO_THE_COAT) })

/** What is believed of a coat before its own evidence. */
export const priorOf = ({ mean, variance }: SharedTheta): Theta => ({ mean, sd: Math.sqrt(variance + OWN_TO_THE_COAT) })

/**
 * What one coat's evidence says of the tree's coats to come: the share of it that is not the coat's own.
 *
 * @source linear Gaussian update (Kalman 1960); the shares are ours.
 */
export function learnFromCoat(shared: SharedTheta, prior: Theta, posterior: Theta): SharedTheta {
  const gain = shared.variance / prior.sd ** 2
  return {
    mean: shared.mean + gain * (posterior.mean - prior.mean),
    variance: Math.max(0, shared.variance - gain ** 2 * (prior.sd ** 2 - posterior.sd ** 2)),
  }
}
