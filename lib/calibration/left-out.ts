import { millisecondsInHour } from 'date-fns/constants'
import type { Outcome, RecipeCoatNow } from '@/lib/calibration/types'

/** Why a covered coat is not learned from, in the order in which the reasons are looked for. */
export const LEFT_OUT_REASONS = [
  'no evidence',
  'air changed',
  'gaps',
  'typed only',
  'rough time',
  'other work',
  'recipe changed',
  'wet below',
  'weak',
] as const
export type LeftOut = (typeof LEFT_OUT_REASONS)[number]

/** The same in a plain sentence. */
export const LEFT_OUT: Record<LeftOut, string> = {
  'no evidence': 'Nobody weighed it, felt it or looked at it while it dried, or what was taken says next to nothing.',
  'air changed': 'Its air was changed afterwards: readings came after it was covered, or its place was corrected while it hung.',
  gaps: 'For more than a fifth of its time no reading tells the air.',
  'typed only': 'Only people read the air where it hung: too coarse to learn from.',
  'rough time': 'Its dip was told to a quarter of an hour at best.',
  'other work': 'It went on unlike its recipe: another bath, another stucco, or brushed on.',
  'recipe changed': 'The coat of this number is another one in the newest version of its recipe.',
  'wet below': 'The coat below was still wet, and nobody knows how much of its water came up.',
  weak: 'What was taken says too little: ‘dry’ alone does not tell since when.',
}

/** Evidence weaker than this says as little as the starting values do, ln scale. Our own. */
export const WEAKEST_SD = 0.25
/** Our own limits. */
const MOST_GAPS = 0.2
const ROUGHEST_MINUTES = 15
const WETTEST_BELOW = 0.1

/** Why nothing is learned from a coat that has evidence; null where it counts. */
export function leftOut(outcome: Outcome, planned: RecipeCoatNow | null): LeftOut | null {
  if (outcome.hasChangedAir) return 'air changed'
  if (outcome.gapShare === null || outcome.gapShare > MOST_GAPS) return 'gaps'
  if (outcome.isTypedOnly) return 'typed only'
  if (outcome.roughMinutes > ROUGHEST_MINUTES) return 'rough time'
  if (outcome.isOtherWork || outcome.way === 'brushed') return 'other work'
  if (outcome.atDip.recipeReferenceHours === null || planned === null || !isSameCoat(outcome, planned)) return 'recipe changed'
  if (outcome.moistureRatioBelow > WETTEST_BELOW) return 'wet below'
  return outcome.sd > WEAKEST_SD ? 'weak' : null
}

const isSameCoat = (outcome: Outcome, planned: RecipeCoatNow): boolean =>
  outcome.kind === planned.kind && outcome.stucco === planned.stucco && Math.abs(outcome.moistureTarget - planned.moistureTarget) < 1e-6

/** A coat that came dry before it was covered, and whose times were promised at its dip: only such tell how good the times are. */
export type CheckedCoat = { outcome: Outcome; likelyHours: number; earliestHours: number; safeHours: number; dryHours: number }

/**
 * The promise against what came, in hours from the stucco; null where one of both is not known. A coat that was dipped over before it was
 * dry is no evidence of dryness, and nobody knows when it would have been.
 */
export function checkedCoat(outcome: Outcome): CheckedCoat | null {
  const { forecast, dryAt, startedAt } = outcome
  if (forecast === null || dryAt === null) return null
  const hours = (at: number) => (at - startedAt) / millisecondsInHour
  return {
    outcome,
    earliestHours: hours(forecast.earliestAt),
    likelyHours: hours(forecast.likelyAt),
    safeHours: hours(forecast.safeAt),
    dryHours: hours(dryAt),
  }
}
