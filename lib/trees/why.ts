import { judge } from '@/lib/trees/assess'
import type { DerivedTree } from '@/lib/trees/derive'
import type { CoatFacts, EvidenceFacts } from '@/lib/trees/facts'
import type { FloorContext } from '@/lib/trees/spans'

type Times = { earliestAt: number | null; likelyAt: number | null; safeAt: number | null }

/** One piece of evidence and what it does to the time: how much later the likely time is with it than without it, all others standing. */
export type WhyPiece = { evidenceId: string; shiftMs: number | null; unheard: string | null }

/** Why the newest coat's time stands where it does. */
export type Why = {
  /** By the recipe and the air alone. */
  byClock: Times & { needReferenceHours: number }
  /** With everything that was weighed, felt and seen on this tree. */
  asTold: Times & { needReferenceHours: number }
  /** Likely time moved by the tree's earlier coats alone, ms. */
  fromEarlierCoatsMs: number | null
  pieces: WhyPiece[]
  /** Share of water left by weight, with the dose at which the coat was weighed. */
  weighed: { evidenceId: string; at: number; moistureRatio: number }[]
  /** Page's exponent by the weighings of this coat; null where fewer than three tell it. */
  pageExponent: number | null
}

/** What moved the time of a tree's newest coat; null where nothing has, or no coat is drying. */
export function whyOf({ facts, newest, call, belief }: DerivedTree, context: FloorContext): Why | null {
  if (!newest || !call || !belief) return null
  const callWith = (evidence: readonly EvidenceFacts[], below: readonly CoatFacts[] = facts.coats.slice(0, -1)) => {
    const coat = { ...newest, evidence }
    return judge({ ...facts, coats: [...below, coat] }, coat, context).call
  }
  const untold = facts.coats.slice(0, -1).map((coat) => ({ ...coat, evidence: [] }))
  const byClock = callWith([], untold)
  const fromEarlier = callWith([])
  const isMoved = newest.evidence.length > 0 || Math.abs(belief.prior.mean) > 1e-6
  if (!isMoved) return null
  return {
    byClock: { ...timesOf(byClock), needReferenceHours: byClock.need.likely },
    asTold: { ...timesOf(call), needReferenceHours: call.need.likely },
    fromEarlierCoatsMs: shiftOf(byClock.likelyAt, fromEarlier.likelyAt),
    pieces: belief.heard.map(({ evidence, unheard }) => ({
      evidenceId: evidence.id,
      shiftMs: shiftOf(callWith(newest.evidence.filter((piece) => piece !== evidence)).likelyAt, call.likelyAt),
      unheard,
    })),
    weighed: belief.weighed.map(({ evidenceId, at, moistureRatio }) => ({ evidenceId, at, moistureRatio })),
    pageExponent: belief.pageExponent,
  }
}

const timesOf = ({ earliestAt, likelyAt, safeAt }: Times): Times => ({ earliestAt, likelyAt, safeAt })

const shiftOf = (before: number | null, after: number | null): number | null => (before === null || after === null ? null : after - before)
