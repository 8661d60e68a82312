import type { Stucco } from '@/lib/coats/vocabulary'

/** Share of what a coat adds in mass that is water, where nothing was measured: slurry with its stucco, and slurry alone. Our own starting values. */
const WATER_SHARE = { withStucco: 0.15, withoutStucco: 0.27 }
/** How far a coat's water may be off, as a share of it: by the starting values, by other coats of the tree. Our own. */
const WATER_ERROR = { assumed: 0.2, likeOthers: 0.08 }

/** A hanging scale reads to this share of its load. Common practice, no source. */
const SCALE_SHARE = 0.001

/** Error of a difference of two weighings of a load, kg. */
export const scaleErrorKg = (massKg: number): number => SCALE_SHARE * massKg * Math.SQRT2

/** What a tree weighed around one coat, kg; null where nobody weighed it. */
export type CoatMasses = {
  stucco: Stucco
  /** Before its dip. */
  baseKg: number | null
  /** After its stucco. */
  wetKg: number | null
  /** Before the next dip, with the share of its water that was left then, or when it had stopped losing any; and by what share that may be off. */
  dry: { massKg: number; moistureRatio: number; error: number } | null
}

/** The water that a coat brought, kg, and by what share that may be off. */
export type CoatWater = { waterKg: number; error: number }

/**
 * The water of a coat: by its own dry mass where that is known, else by the share of the added mass that was water in the tree's other
 * coats, else by a starting value. Null where it was not weighed before the dip and after the stucco.
 *
 * @param sharesSeen water as a share of the added mass in the tree's earlier coats of the same sort.
 * @source mass balance; the starting values are ours.
 */
export function coatWater({ stucco, baseKg, wetKg, dry }: CoatMasses, sharesSeen: readonly number[]): CoatWater | null {
  if (wetKg === null) return null
  const lostKg = dry && (wetKg - dry.massKg) / (1 - dry.moistureRatio)
  if (lostKg !== null && lostKg > 0) return { waterKg: lostKg, error: dry?.error ?? WATER_ERROR.likeOthers }
  const addedKg = baseKg === null ? null : wetKg - baseKg
  if (addedKg === null || addedKg <= 0) return null
  if (sharesSeen.length > 0) {
    const share = sharesSeen.reduce((sum, seen) => sum + seen, 0) / sharesSeen.length
    return { waterKg: share * addedKg, error: WATER_ERROR.likeOthers }
  }
  const share = stucco === 'none' ? WATER_SHARE.withoutStucco : WATER_SHARE.withStucco
  return { waterKg: share * addedKg, error: WATER_ERROR.assumed }
}

/** Water as a share of the mass that a coat added; null where its dry mass, or the mass below it, is not known. */
export function waterShare(masses: CoatMasses): number | null {
  const { baseKg, wetKg, dry } = masses
  if (baseKg === null || wetKg === null || dry === null || wetKg <= baseKg) return null
  const share = (wetKg - dry.massKg) / (1 - dry.moistureRatio) / (wetKg - baseKg)
  return share > 0 && share < 1 ? share : null
}

/** A moisture ratio by weight with its error. */
export type WeighedMoisture = { moistureRatio: number; sigma: number }

/**
 * Share of a coat's water that is left, by weight: MR = 1 - (wet - now) / water. Its error joins that of the ratio itself (0.03), of the
 * water, and of the scale.
 *
 * @source mass balance; the errors are ours.
 * @example weighedMoisture({ wetKg: 1.24, massKg: 1.165, water: { waterKg: 0.14, error: 0.02 } }) // moistureRatio 0.464
 */
export function weighedMoisture(
  { wetKg, massKg, water }: { wetKg: number; massKg: number; water: CoatWater },
  baseSigma: number,
): WeighedMoisture {
  const moistureRatio = 1 - (wetKg - massKg) / water.waterKg
  return { moistureRatio, sigma: Math.hypot(baseSigma, (1 - moistureRatio) * water.error, scaleErrorKg(massKg) / water.waterKg) }
}

/** Two weighings this far apart in dose that differ by less than this share of the coat's water: it has stopped losing any. Common practice, no source. */
const CONSTANT_AFTER_REFERENCE_HOURS = 1
const CONSTANT_WITHIN_SHARE = 0.005
/** A scale coarser than this share of the water cannot tell that a coat has stopped losing any. Our own. */
const COARSEST_SCALE_SHARE = 0.05
/** Where the scale's error decides, a slow coat has to have had this share of its need in between: else it is wet and the scale does not see it. */
const CONSTANT_AFTER_SHARE = 0.25

/**
 * The first weighing at which a coat had stopped losing water: at least one reference hour after another that weighed the same, within
 * half a percent of the coat's water or the scale's error.
 *
 * @param need of the coat, reference hours.
 * @returns its index, or null; null too where the scale is too coarse to say so.
 */
export function constantFrom(weighings: readonly { massKg: number; dose: number }[], water: CoatWater, need: number): number | null {
  for (const [index, later] of weighings.entries()) {
    const byRule = CONSTANT_WITHIN_SHARE * water.waterKg
    const byScale = scaleErrorKg(later.massKg)
    const within = Math.max(byRule, byScale)
    if (byScale > COARSEST_SCALE_SHARE * water.waterKg) continue
    const apart = byScale > byRule ? Math.max(CONSTANT_AFTER_REFERENCE_HOURS, CONSTANT_AFTER_SHARE * need) : CONSTANT_AFTER_REFERENCE_HOURS
    const isConstant = weighings
      .slice(0, index)
      .some((earlier) => later.dose - earlier.dose >= apart && Math.abs(earlier.massKg - later.massKg) <= within)
    if (isConstant) return index
  }
  return null
}
