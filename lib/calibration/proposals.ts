import { leftOut } from '@/lib/calibration/left-out'
import type { ClockNow, Outcome, Recess, RecipeCoatNow } from '@/lib/calibration/types'
import { COAT_SCATTER, type Theta } from '@/lib/drying/evidence'

/** Fewer coats than this propose nothing. Our own. */
export const FEWEST_COATS = 5
/** A smaller change than this is none. Our own. */
const LEAST_CHANGE = 0.03

/** How far a figure may be off before any coat is known, ln scale. Our own. */
export const PRIOR_SD = { 'recipe coat': 0.2, place: 0.1, recess: 0.15 } as const

/** What several coats say together: mean and error on the ln scale, and how many they are. */
export type Learned = Theta & { count: number }

/**
 * The mean of what finished coats say of a figure, drawn towards no change: each coat counts by the variance of its own evidence and of the
 * scatter between coats, precisions add.
 *
 * @param priorSd how far the figure may be off before any coat is known.
 * @source Bayes' rule for a normal mean (e.g. Gelman et al., Bayesian Data Analysis, sec. 2.5); the prior and the scatter are ours.
 * @example learnMean(0.2, fiveTimes({ mean: 0.12, sd: 0.08 })) // mean 0.1048, sd 0.0711
 */
export function learnMean(priorSd: number, said: readonly Theta[]): Learned {
  const weights = said.map(({ sd }) => 1 / (sd ** 2 + COAT_SCATTER ** 2))
  const precision = 1 / priorSd ** 2 + weights.reduce((sum, weight) => sum + weight, 0)
  const mean = said.reduce((sum, { mean: value }, index) => sum + value * weights[index]!, 0) / precision
  return { mean, sd: Math.sqrt(1 / precision), count: said.length }
}

/**
 * What a coat says of the clock as it stands now, ln(true need / need): its own figure was found with the need, the recess and the air of
 * its day.
 */
export function thetaNow({ theta, atDip, placeId, recessClass }: Outcome, planned: RecipeCoatNow, now: ClockNow): number {
  return (
    theta +
    Math.log((atDip.recipeReferenceHours ?? planned.needReferenceHours) / planned.needReferenceHours) +
    Math.log(atDip.recessFactor / now.recessFactors[recessClass]) +
    Math.log((now.airFactors.get(placeId) ?? atDip.airFactor) / atDip.airFactor)
  )
}

/** A coat that is learned from, with what it says of today's clock. */
export type CountedCoat = { outcome: Outcome; planned: RecipeCoatNow; said: Theta }

const coatKey = ({ recipeId, number }: { recipeId: string; number: number }) => `${recipeId} ${number}`

/** The coats that count, each beside the recipe's coat it is held against. */
export function countedCoats(outcomes: readonly Outcome[], now: ClockNow): CountedCoat[] {
  const plannedOf = new Map(now.recipeCoats.map((coat) => [coatKey(coat), coat]))
  return outcomes.flatMap((outcome) => {
    const planned = plannedOf.get(coatKey(outcome)) ?? null
    if (planned === null || leftOut(outcome, planned) !== null) return []
    return [{ outcome, planned, said: { mean: thetaNow(outcome, planned, now), sd: outcome.sd } }]
  })
}

/**
 * - too few: fewer than five coats.
 * - agrees: the change is smaller than its own error, or than 3 %.
 * - change: a person may accept it.
 */
export type Verdict = 'too few' | 'agrees' | 'change'

function verdictOf({ mean, sd, count }: Learned): Verdict {
  if (count < FEWEST_COATS) return 'too few'
  return Math.abs(mean) < sd || Math.abs(Math.exp(mean) - 1) < LEAST_CHANGE ? 'agrees' : 'change'
}

export type RecipeCoatProposal = {
  coat: RecipeCoatNow
  learned: Learned
  verdict: Verdict
  /** Reference hours, to a hundredth; the need as it is where nothing changes. */
  needAfter: number
  spreadAfter: number
  /** A person may accept it, or confirm the need as it is; false too where that was done with as many coats. */
  isOpen: boolean
}

/**
 * What finished coats say of each coat of the recipes: those of trees without a recess.
 *
 * need = D* exp(mu), spread = sqrt(0.15^2 + sd_mu^2): what is left is the scatter between coats, so it never falls under 0.15.
 *
 * @source our own model; the mean by `learnMean`.
 */
export function recipeCoatProposals(counted: readonly CountedCoat[], { recipeCoats }: ClockNow): RecipeCoatProposal[] {
  const open = withoutRecess(counted)
  return recipeCoats.map((coat) => {
    const learned = learnMean(
      PRIOR_SD['recipe coat'],
      open.filter(({ planned }) => planned === coat).map(({ said }) => said),
    )
    const proposed = toHundredths(coat.needReferenceHours * Math.exp(learned.mean))
    const isSame = verdictOf(learned) === 'change' && proposed === toHundredths(coat.needReferenceHours)
    const verdict = isSame ? 'agrees' : verdictOf(learned)
    return {
      coat,
      learned,
      verdict,
      needAfter: verdict === 'change' ? proposed : coat.needReferenceHours,
      spreadAfter: Math.sqrt(COAT_SCATTER ** 2 + learned.sd ** 2),
      isOpen: verdict === 'change' || (verdict === 'agrees' && learned.count > (coat.calibratedByCoats ?? 0)),
    }
  })
}

const withoutRecess = (counted: readonly CountedCoat[]) => counted.filter(({ outcome }) => outcome.recessClass === 'none')
const toHundredths = (value: number) => Math.round(value * 100) / 100

/** A factor that finished coats propose, or why they do not. */
export type FactorProposal<Subject> = {
  subject: Subject
  learned: Learned
  verdict: Verdict | 'nothing to compare'
  factorBefore: number
  /** To a hundredth; as it was where nothing changes. */
  factorAfter: number
}

/** Recipe coats with enough coats behind them to hold others against, and what those say of each. */
function knownCoats(counted: readonly CountedCoat[], now: ClockNow): Map<RecipeCoatNow, number> {
  return new Map(
    recipeCoatProposals(counted, now)
      .filter(({ learned }) => learned.count >= FEWEST_COATS)
      .map(({ coat, learned }) => [coat, learned.mean]),
  )
}

const residual = ({ said, planned }: CountedCoat, known: ReadonlyMap<RecipeCoatNow, number>): Theta => ({
  mean: said.mean - (known.get(planned) ?? 0),
  sd: said.sd,
})

/**
 * What finished coats say of the air of places: those that hung at one place only, each against the others of its recipe's coat. More dose
 * needed than elsewhere means that the air dries slower than its speed says: factor = exp(-mean).
 *
 * Only where coats of the same recipe's coat hung at two places or more: at one place alone, nobody can tell the air from the recipe.
 */
export function placeProposals(counted: readonly CountedCoat[], now: ClockNow): FactorProposal<string>[] {
  const known = knownCoats(counted, now)
  const still = withoutRecess(counted).filter(({ outcome }) => !outcome.hasMoved && outcome.isAirAsNow)
  const placesOf = new Map<RecipeCoatNow, Set<string>>()
  for (const { outcome, planned } of still) placesOf.set(planned, (placesOf.get(planned) ?? new Set()).add(outcome.placeId))
  return [...new Set(still.map(({ outcome }) => outcome.placeId))].map((placeId) => {
    const here = still.filter(({ outcome }) => outcome.placeId === placeId)
    const comparable = here.filter(({ planned }) => known.has(planned) && (placesOf.get(planned)?.size ?? 0) > 1)
    const learned = learnMean(
      PRIOR_SD.place,
      comparable.map((coat) => residual(coat, known)),
    )
    return factorProposal(placeId, learned, { before: now.airFactors.get(placeId) ?? 1, change: -learned.mean, limits: [0.3, 3] })
  })
}

/** What finished coats of trees with a recess say of its class, against those of trees without: factor x exp(mean). */
export function recessProposals(counted: readonly CountedCoat[], now: ClockNow): FactorProposal<Recess>[] {
  const known = knownCoats(counted, now)
  return RECESSES.flatMap((recess) => {
    const those = counted.filter(({ outcome }) => outcome.recessClass === recess)
    if (those.length === 0) return []
    const comparable = those.filter(({ planned }) => known.has(planned))
    const learned = learnMean(
      PRIOR_SD.recess,
      comparable.map((coat) => residual(coat, known)),
    )
    return [factorProposal(recess, learned, { before: now.recessFactors[recess], change: learned.mean, limits: [0.5, 10] })]
  })
}

/** The classes that have a factor of their own. */
export const RECESSES = ['deep recess', 'closed core', 'closed core, no duct'] as const satisfies readonly Recess[]

function factorProposal<Subject>(
  subject: Subject,
  learned: Learned,
  { before, change, limits: [least, most] }: { before: number; change: number; limits: readonly [number, number] },
): FactorProposal<Subject> {
  const after = toHundredths(Math.min(most, Math.max(least, before * Math.exp(change))))
  const said = learned.count === 0 ? 'nothing to compare' : verdictOf(learned)
  const verdict = said === 'change' && after === toHundredths(before) ? 'agrees' : said
  return { subject, learned, verdict, factorBefore: before, factorAfter: verdict === 'change' ? after : before }
}
