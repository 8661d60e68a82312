import { millisecondsInMinute } from 'date-fns/constants'
import { creditedFrom } from '@/lib/drying/coat-call'
import type { Theta } from '@/lib/drying/evidence'
import { doseOverSpans, instantWhenDose } from '@/lib/drying/tree-dose'
import { LONGEST_WINDOW_MS } from '@/lib/trees/assess'
import { outcomeOf } from '@/lib/trees/coat-evidence'
import { clockStart, type CoatFacts, type TreeFacts } from '@/lib/trees/facts'
import { airAround, dryingSpans, readingsBehind, type FloorContext } from '@/lib/trees/spans'
import { Coat, Evidence } from '@/models'

/**
 * Writes down what a covered coat says of the clock: the dose at each piece of its evidence, its own theta, and when it was dry by that.
 * Those doses stand from then on, so that a finished coat costs no reading.
 *
 * @param coat as it was covered: with `coveredAt` and its moisture ratio at that moment.
 * @returns the coat with the doses of its evidence.
 */
export async function settleCoat(facts: TreeFacts, coat: CoatFacts, context: FloorContext): Promise<CoatFacts> {
  const until = coat.coveredAt ?? context.now
  const start = clockStart(coat)
  // Older air is not at hand: then what was written before stands.
  const isAirKnown = start >= context.now - LONGEST_WINDOW_MS
  const spans = dryingSpans(context, facts.stays, start)
  const from = creditedFrom({ clockStartsAt: start }, until, readingsBehind(context, facts.stays, start, until))
  const settled: CoatFacts = isAirKnown
    ? {
        ...coat,
        evidence: coat.evidence.map((piece) => ({ ...piece, doseReferenceHours: doseOverSpans(spans, from, piece.takenAt).likely })),
      }
    : coat
  const theta = outcomeOf(facts, settled, context.pressurePa, (piece) => piece.doseReferenceHours)
  const dryAt = theta && isAirKnown ? instantWhenDose(spans, from, trueNeed(coat, theta), 'likely') : null
  for (const { id, doseReferenceHours } of settled.evidence) await Evidence.update({ doseReferenceHours }, { where: { id } })
  await Coat.update(
    {
      outcomeTheta: theta && Math.max(-3, Math.min(3, theta.mean)),
      outcomeSd: theta?.sd ?? null,
      // Where it was dipped over before it was dry, nobody knows when it would have been.
      ...(isAirKnown && {
        outcomeDryAt: dryAt !== null && dryAt <= until ? dryAt : null,
        outcomeGapShare: gapShare(facts, context, start, until),
      }),
    },
    { where: { id: coat.id } },
  )
  return settled
}

const trueNeed = ({ needReferenceHours }: CoatFacts, { mean }: Theta): number => needReferenceHours * Math.exp(mean)

/** Share of a coat's time for which no reading stands, by the hours that it touched. */
function gapShare(facts: TreeFacts, context: FloorContext, from: number, to: number): number {
  const hours = airAround(context, facts.stays, from, to).flatMap((stretch) =>
    stretch.climate.hours.filter((hour) => hour.hourStart + 60 * millisecondsInMinute > stretch.from && hour.hourStart < stretch.to),
  )
  if (hours.length === 0) return 1
  const missing = hours.reduce((sum, hour) => sum + hour.gapMinutes + (60 - hour.coveredMinutes), 0)
  return Math.min(1, missing / (60 * hours.length))
}

/** Takes it back, for a coat that is the newest again: its doses follow the readings as before. */
export async function unsettleCoat(coatId: string): Promise<void> {
  await Evidence.update({ doseReferenceHours: null }, { where: { coatId } })
  await Coat.update({ outcomeTheta: null, outcomeSd: null, outcomeDryAt: null, outcomeGapShare: null }, { where: { id: coatId } })
}
