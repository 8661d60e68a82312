import type { CoatingWay, CoatKind, RecessClass, Stucco } from '@/lib/coats/vocabulary'

/** What finished coats can set right. */
export const CALIBRATION_SCOPES = ['recipe coat', 'place', 'recess'] as const
export type CalibrationScope = (typeof CALIBRATION_SCOPES)[number]

/** A class of recess that has a factor of its own. */
export type Recess = Exclude<RecessClass, 'none'>

/** A covered coat and what its own evidence says of the clock. Instants in epoch ms, needs in reference hours, shares from 0 to 1. */
export type Outcome = {
  coatId: string
  tag: string
  recipeId: string
  number: number
  kind: CoatKind
  stucco: Stucco
  way: CoatingWay
  moistureTarget: number
  recessClass: RecessClass
  placeId: string
  dippedAt: number
  /** The moment of the stucco. */
  startedAt: number
  coveredAt: number
  roughMinutes: number
  /** Unlike the recipe in its bath or its stucco. */
  isOtherWork: boolean
  moistureRatioBelow: number
  dippedBy: { id: string; name: string }
  /** ln(true need / need) by its own evidence, and the error of that. */
  theta: number
  sd: number
  /** When it was dry by that; null where it was dipped over before. */
  dryAt: number | null
  /** Share of its time without readings; null where the air is not known any more. */
  gapShare: number | null
  /** P10, P50 and P90 as they were given at the dip. */
  forecast: { earliestAt: number; likelyAt: number; safeAt: number } | null
  /** The figures that its need and its dose were made with. */
  atDip: { recipeReferenceHours: number | null; recessFactor: number; airFactor: number }
  hasMoved: boolean
  /** People read the air where it hung; no sensor did. */
  isTypedOnly: boolean
  /** Readings that came after it was covered have changed its dose, or the figures of its place changed while it hung. */
  hasChangedAir: boolean
  /** Its place has the speeds and the sensor still that it had then. */
  isAirAsNow: boolean
}

/** A coat of the newest version of a recipe. */
export type RecipeCoatNow = {
  recipeId: string
  number: number
  kind: CoatKind
  stucco: Stucco
  moistureTarget: number
  needReferenceHours: number
  needSpread: number
  /** How many finished coats stand behind the need; null for starting values. */
  calibratedByCoats: number | null
}

/** The figures of the clock as they stand now. */
export type ClockNow = {
  recipeCoats: readonly RecipeCoatNow[]
  /** By the place's id. */
  airFactors: ReadonlyMap<string, number>
  recessFactors: Readonly<Record<RecessClass, number>>
}
