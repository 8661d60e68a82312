import { millisecondsInHour, millisecondsInMinute } from 'date-fns/constants'
import type { Guard } from '@/lib/coats/vocabulary'
import { callCoat, creditedFrom } from '@/lib/drying/coat-call'
import { coatPhase } from '@/lib/drying/coat-phase'
import { dampInStoreFlag, isOverdue } from '@/lib/drying/flags'
import { dampAirSigma, guardFor } from '@/lib/drying/need'
import { doseOverSpans } from '@/lib/drying/tree-dose'
import type { CoatCall } from '@/lib/drying/types'
import { humidityOf } from '@/lib/room/climate'
import { beliefOf, type CoatBelief } from '@/lib/trees/coat-evidence'
import { clockStart, type CoatFacts, type RecipeCoatFacts, type TreeFacts } from '@/lib/trees/facts'
import { airAround, dryingSpans, readingsAround, readingsBehind, type FloorContext } from '@/lib/trees/spans'
import type { TreeState } from '@/lib/trees/states'

/** For this long after its guard a coat is 'dip now'; then it is 'waiting'. Our own choice. */
const FRESH_MS = 15 * millisecondsInMinute

/** A coat hung longer than this adds nothing that anybody can use; it also bounds what a page has to read. */
export const LONGEST_WINDOW_MS = 60 * 24 * millisecondsInHour

/** What is derived of a tree at one moment. */
export type Assessment = {
  facts: TreeFacts
  state: TreeState
  stateSince: number | null
  newest: CoatFacts | null
  /** The clock's call on the newest coat; null on bare wax and on trees that left the floor. */
  call: CoatCall | null
  /** What is believed of its need, and the evidence behind it; null where there is no call. */
  belief: CoatBelief | null
  guard: Guard | null
  /** The coat to dip next; null when every coat is on. */
  next: RecipeCoatFacts | null
  /** Every coat of the recipe is on. */
  isLastOn: boolean
  /** The newest coat may be dipped over, or the wax may take coat 1. */
  mayDip: boolean
  /** Since when, by the clock or by a person's word. */
  dippableSince: number | null
}

/** The recipe's coat of a number; null beyond its list. */
export function recipeCoatOf(facts: TreeFacts, number: number): RecipeCoatFacts | null {
  return facts.recipe.coats.find((coat) => coat.number === number) ?? null
}

/** The guard of a coat on this tree, on or to come: its own, and the safe one wherever the shell asks for it. */
export function guardOf(facts: TreeFacts, coat: Pick<CoatFacts, 'number' | 'kind' | 'guard'>): Guard {
  return guardFor({
    kind: coat.kind,
    isLast: coat.number >= facts.recipe.coats.length,
    recessClass: facts.recessClass,
    recipeGuard: coat.guard,
  })
}

/** The drying clock's call on one coat of a tree, as it stands at `at`, by the air and by what people weighed, felt and saw until then. */
export function callOf(facts: TreeFacts, coat: CoatFacts, context: FloorContext, at: number = context.now): CoatCall {
  return judge(facts, coat, context, at).call
}

/** The call with what is believed of the coat's need. */
export function judge(
  facts: TreeFacts,
  coat: CoatFacts,
  context: FloorContext,
  at: number = context.now,
): { call: CoatCall; belief: CoatBelief } {
  const start = Math.max(clockStart(coat), context.now - LONGEST_WINDOW_MS)
  const spans = dryingSpans(context, facts.stays, start)
  const readings = readingsBehind(context, facts.stays, start, at)
  const from = creditedFrom({ clockStartsAt: start }, at, readings)
  const belief = beliefOf(facts, coat, context.pressurePa, at, ({ takenAt }) => doseOverSpans(spans, from, Math.min(takenAt, at)).likely)
  const humidity = humidityOf(airAround(context, facts.stays, start, at))
  const call = callCoat({
    coat: {
      number: coat.number,
      kind: coat.kind,
      clockStartsAt: start,
      roughMinutes: coat.roughMinutes,
      needReferenceHours: coat.needReferenceHours * Math.exp(belief.theta.mean),
      moistureTarget: coat.moistureTarget,
      guard: guardOf(facts, coat),
      recessClass: facts.recessClass,
      airTempAtDipC: coat.airTempC,
      baseSigma: belief.theta.sd,
      airSigma: humidity === null ? 0 : dampAirSigma(humidity.meanPct),
      ...(belief.pageExponent === null ? {} : { pageExponent: belief.pageExponent }),
    },
    spans,
    now: at,
    readings,
  })
  return { call, belief }
}

/** Derives everything of one tree at the context's moment. First match wins, in the order of TREE_STATES. */
export function assessTree(facts: TreeFacts, context: FloorContext): Assessment {
  const newest = facts.coats.at(-1) ?? null
  const coatCount = facts.recipe.coats.length
  const isLastOn = facts.coats.length >= coatCount
  const hasLeft = facts.scrappedAt !== null || facts.releasedAt !== null
  const judged = newest && !hasLeft ? judge(facts, newest, context) : null
  const call = judged?.call ?? null
  const dippableSince = hasLeft ? null : dippableFrom(facts, call)
  const base = {
    facts,
    newest,
    call,
    belief: judged?.belief ?? null,
    guard: newest ? guardOf(facts, newest) : null,
    next: isLastOn || hasLeft ? null : recipeCoatOf(facts, facts.coats.length + 1),
    isLastOn,
    mayDip: !isLastOn && facts.hold === null && dippableSince !== null,
    dippableSince,
  }
  return { ...base, ...stateOf(base, context) }
}

type Base = Omit<Assessment, 'state' | 'stateSince'>

function dippableFrom(facts: TreeFacts, call: CoatCall | null): number | null {
  if (call === null) return facts.intakePassedAt
  const byWord = facts.word?.verdict === 'dry' ? facts.word.at : null
  if (call.guardReachedAt === null) return byWord
  return byWord === null ? call.guardReachedAt : Math.min(byWord, call.guardReachedAt)
}

function stateOf(base: Base, context: FloorContext): { state: TreeState; stateSince: number | null } {
  const { facts, call, newest, dippableSince } = base
  if (facts.scrappedAt !== null) return { state: 'scrapped', stateSince: facts.scrappedAt }
  if (facts.releasedAt !== null) return { state: 'released', stateSince: facts.releasedAt }
  if (facts.hold !== null) return { state: 'held', stateSince: facts.hold.at }
  if (newest === null || call === null) {
    return facts.intakePassedAt === null
      ? { state: 'bare wax', stateSince: null }
      : { state: 'wax ready', stateSince: facts.intakePassedAt }
  }
  if (base.isLastOn) return finishedState(base, call, context)
  if (dippableSince !== null) {
    const overdueSince = overdueFrom(newest, context)
    if (overdueSince !== null) return { state: 'overdue', stateSince: overdueSince }
    return { state: context.now - dippableSince < FRESH_MS ? 'dip now' : 'waiting', stateSince: dippableSince }
  }
  const phase = coatPhase(call, context.now)
  return { state: phase === 'dry' ? 'dip now' : phase, stateSince: null }
}

/** Past the wet coat's longest wait, or the pour date can no longer be kept. Only a coat that may be dipped over is overdue. */
function overdueFrom({ dippedAt, longestWaitHours }: CoatFacts, context: FloorContext): number | null {
  const hours = (context.now - dippedAt) / millisecondsInHour
  return isOverdue(hours, longestWaitHours) ? dippedAt + longestWaitHours * millisecondsInHour : null
}

/** A dry last coat: by the safe time, or by the likely one and a person's 'dry'. A hold does not make it wet. */
export function isDriedOut(facts: TreeFacts, call: CoatCall): boolean {
  return call.isSafeDry || (call.isLikelyDry && facts.word?.verdict === 'dry')
}

function finishedState(base: Base, call: CoatCall, context: FloorContext): { state: TreeState; stateSince: number | null } {
  const { facts } = base
  if (!isDriedOut(facts, call)) return { state: 'last coat on', stateSince: null }
  const dryAt = call.isSafeDry ? call.safeAt : (facts.word?.at ?? null)
  const isLookedOver = facts.lookedOverAt !== null
  if (!isLookedOver || dampInStore(base.facts, call, context) !== null) return { state: 'dried out', stateSince: dryAt }
  return { state: 'ready for burnout', stateSince: Math.max(facts.lookedOverAt ?? 0, dryAt ?? 0) }
}

/** Whether a finished shell hung in damp air since it was dry, or since somebody last looked it over. */
export function dampInStore(facts: TreeFacts, call: CoatCall, context: FloorContext) {
  const since = Math.max(call.safeAt ?? call.likelyAt ?? context.now, facts.lookedOverAt ?? 0)
  return dampInStoreFlag(readingsAround(context, facts.stays, since, context.now), since, context.now)
}
