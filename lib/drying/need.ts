import type { CoatKind, Guard, RecessClass, Spacing, Stucco } from '@/lib/coats/vocabulary'
import { assertWithin } from '@/lib/drying/guards'
import type { Dose, NeedInput } from '@/lib/drying/types'

/** Thickness of the wet layer by stucco. Our own starting values, to be calibrated. */
const STUCCO_FACTOR: Record<Stucco, number> = { none: 1, fine: 0.9, medium: 1, coarse: 1.15 }

/** Smallest wall-to-wall gap of the tree. Our own starting values, to be calibrated. */
export const SECTION_FACTOR: Record<Spacing, number> = { open: 1, crowded: 1.25 }

/** The slowest spot of the tree. Our own starting values, to be calibrated. */
export const RECESS_FACTOR: Readonly<Record<RecessClass, number>> = {
  none: 1,
  'deep recess': 1.6,
  'closed core': 2.5,
  'closed core, no duct': 3,
}

/** Share of the water left in the coat below that adds to the next need. Our own starting value, to be calibrated. */
const CARRIED_WATER = 0.5

/**
 * Need of one coat: reference hours from its stucco to its moisture target.
 *
 *   need = D* x f_stucco(used) / f_stucco(recipe) x f_section x f_recess x (1 + 0.5 MR_below) x exp(theta)
 *
 * @throws {RangeError} if the recipe's hours are not 0.01 to 1000, the moisture below not 0 to 1, or theta not -2 to 2.
 * @source our own model.
 */
export function needReferenceHours(input: NeedInput): number {
  assertWithin('Reference hours of the recipe', input.recipeReferenceHours, 0.01, 1000)
  assertWithin('Moisture ratio of the coat below', input.moistureRatioBelow, 0, 1)
  assertWithin("The tree's own factor on a log scale", input.treeTheta, -2, 2)
  const stucco = STUCCO_FACTOR[input.usedStucco] / STUCCO_FACTOR[input.recipeStucco]
  const carried = 1 + CARRIED_WATER * input.moistureRatioBelow
  return (
    input.recipeReferenceHours *
    stucco *
    SECTION_FACTOR[input.spacing] *
    (input.recessFactors ?? RECESS_FACTOR)[input.recessClass] *
    carried *
    Math.exp(input.treeTheta)
  )
}

/** Spread of ln(need) before anything is measured: recipe, tree and sensor together. Our own starting value, to be calibrated. */
export const DEFAULT_SIGMA = 0.25

/** How far a recess may be off, ln scale. Our own starting value. */
export const RECESS_SIGMA = 0.1

/** Total spread where a person read the air instead of a sensor, no recess. Our own starting value. */
const TYPED_SIGMA = 0.35

/**
 * Spread of ln(need): the base, a recess, typed readings and damp air added in quadrature. 0.25; 0.269 with a recess; 0.35 when typed.
 *
 * @source our own model, to be calibrated.
 */
export function sigma({
  recessClass,
  hasTyped,
  baseSigma = DEFAULT_SIGMA,
  airSigma = 0,
}: {
  recessClass: RecessClass
  hasTyped: boolean
  baseSigma?: number
  airSigma?: number
}): number {
  const recess = recessClass === 'none' ? 0 : RECESS_SIGMA
  const typedSquared = hasTyped ? TYPED_SIGMA ** 2 - DEFAULT_SIGMA ** 2 : 0
  return Math.sqrt(baseSigma ** 2 + recess ** 2 + typedSquared + airSigma ** 2)
}

/** Above this the sensor's error is taken as it is here: at saturation the speed is nothing and its relative error has no end. */
const DAMPEST_PCT = 96

const speedError = (relHumidityPct: number): number => 0.0225 / (1 - Math.min(relHumidityPct, DAMPEST_PCT) / 100)

/**
 * What damp air adds to the spread: the relative error of the drying speed that a hygrometer of +-2 % leaves grows as the air comes
 * near saturation. At 50 % RH and below it is in the base spread already.
 *
 * @returns 0 to 50 %, 0.08 at 75 %, 0.14 at 85 %.
 * @source derivative of the wet-bulb depression by humidity, 0.045 at 21 degC and 50 % RH; rounded to 0.0225 / (1 - RH). Our own model.
 */
export function dampAirSigma(relHumidityPct: number): number {
  assertWithin('Relative humidity in percent', relHumidityPct, 0, 105)
  return Math.sqrt(Math.max(0, speedError(relHumidityPct) ** 2 - speedError(50) ** 2))
}

/** 90 % point of the standard normal distribution. */
const Z_90 = 1.2815515655446004

/**
 * Need at P10 (`low`), P50 (`likely`) and P90 (`high`) of a log-normal spread, reference hours.
 *
 * @source quantiles of the log-normal distribution: need x exp(-z sigma), need, need x exp(z sigma).
 */
export function needBand(need: number, spread: number): Dose {
  return { likely: need, low: need * Math.exp(-Z_90 * spread), high: need * Math.exp(Z_90 * spread) }
}

/** The time that lets a coat be dipped over: the safe one for face coats, the last coat and any recess, else the recipe's. Common practice, no source. */
export function guardFor({
  kind,
  isLast,
  recessClass,
  recipeGuard,
}: {
  kind: CoatKind
  isLast: boolean
  recessClass: RecessClass
  recipeGuard: Guard
}): Guard {
  return kind === 'face' || isLast || recessClass !== 'none' ? 'safe' : recipeGuard
}
