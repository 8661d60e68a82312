import { learnFromCoat, priorOf, sharedBefore, type Theta } from '@/lib/drying/evidence'
import { needBand, needReferenceHours, sigma } from '@/lib/drying/need'
import { instantWhenDose } from '@/lib/drying/tree-dose'
import { nextOpenInstant } from '@/lib/schedule/shifts'
import { guardOf, type Assessment } from '@/lib/trees/assess'
import { sharedOf } from '@/lib/trees/coat-evidence'
import type { RecipeCoatFacts } from '@/lib/trees/facts'
import { dryingSpans, type FloorContext } from '@/lib/trees/spans'

export type TimePair = { earliestAt: number | null; likelyAt: number | null; safeAt: number | null }

/** A coat to come: when it can be dipped, by the likely and by the safe chain. */
export type PlannedDip = { number: number; likelyAt: number | null; safeAt: number | null }

export type PlayedForward = {
  plannedDips: PlannedDip[]
  /** When the last coat is dried out; null when that lies beyond the horizon or cannot be foreseen. */
  driedOut: TimePair | null
}

/**
 * Plays a tree forward to its last coat: each coat is dipped over in the first open minute of a shift after its guard.
 * The likely chain takes the guard's own time of every coat; the safe chain waits for nine of ten each time, so it is the later one.
 *
 * A held tree, an unknown coat and bare wax whose intake is open have no future that anybody could promise.
 */
export function playForward(assessment: Assessment, context: FloorContext): PlayedForward {
  const { facts, state, call, mayDip } = assessment
  if (['scrapped', 'released', 'held', 'bare wax', 'unknown'].includes(state)) return { plannedDips: [], driedOut: null }
  if (assessment.isLastOn) {
    const driedOut = call ? { earliestAt: call.earliestAt, likelyAt: call.likelyAt, safeAt: call.safeAt } : null
    return { plannedDips: [], driedOut }
  }
  const startLikely = mayDip ? context.now : assessment.guard === 'safe' ? (call?.safeAt ?? null) : (call?.likelyAt ?? null)
  const startSafe = mayDip ? context.now : (call?.safeAt ?? null)
  const likely = chain(assessment, context, startLikely, 'guard')
  const safe = chain(assessment, context, startSafe, 'safe')
  const plannedDips = facts.recipe.coats
    .filter((coat) => coat.number > facts.coats.length)
    .map((coat, index) => ({ number: coat.number, likelyAt: likely.dips[index] ?? null, safeAt: safe.dips[index] ?? null }))
  return { plannedDips, driedOut: { earliestAt: likely.earliestAt, likelyAt: likely.likelyAt, safeAt: safe.safeAt } }
}

/** What is believed of a coat to come, by what the tree's coats so far have told. */
function thetaToCome({ facts, newest, belief }: Assessment, coat: RecipeCoatFacts, { pressurePa }: FloorContext): Theta {
  if (newest === null || belief === null || newest.isCalibrated !== coat.isCalibrated) return priorOf(sharedBefore(coat.needSpread))
  return priorOf(learnFromCoat(sharedOf(facts, newest, pressurePa), belief.prior, belief.theta))
}

type Chain = TimePair & { dips: (number | null)[] }

function chain(assessment: Assessment, context: FloorContext, start: number | null, by: 'guard' | 'safe'): Chain {
  const { facts } = assessment
  const toCome = facts.recipe.coats.filter((coat) => coat.number > facts.coats.length)
  const dips: (number | null)[] = []
  let dryAt: TimePair = { earliestAt: null, likelyAt: start, safeAt: start }
  let readyAt = start
  for (const coat of toCome) {
    const dippedAt = readyAt === null ? null : nextOpenInstant(readyAt, context.shifts)
    dips.push(dippedAt)
    if (dippedAt === null) {
      dryAt = { earliestAt: null, likelyAt: null, safeAt: null }
      readyAt = null
      continue
    }
    const from = dippedAt + coat.drainSeconds * 1000
    const theta = thetaToCome(assessment, coat, context)
    const need = needBand(
      needReferenceHours({
        recipeReferenceHours: coat.needReferenceHours,
        recipeStucco: coat.stucco,
        usedStucco: coat.stucco,
        spacing: facts.spacing,
        recessClass: facts.recessClass,
        moistureRatioBelow: 0,
        treeTheta: theta.mean,
        recessFactors: context.recessFactors,
      }),
      sigma({ recessClass: facts.recessClass, hasTyped: false, baseSigma: theta.sd }),
    )
    const spans = dryingSpans(context, facts.stays, from)
    dryAt = {
      earliestAt: instantWhenDose(spans, from, need.low, 'high'),
      likelyAt: instantWhenDose(spans, from, need.likely, 'likely'),
      safeAt: instantWhenDose(spans, from, need.high, 'low'),
    }
    readyAt = by === 'safe' || guardOf(facts, coat) === 'safe' ? dryAt.safeAt : dryAt.likelyAt
  }
  return { ...dryAt, dips }
}
