import { moistureRatio } from '@/lib/drying/moisture'
import { doseOverSpans } from '@/lib/drying/tree-dose'
import type { CoatCall, DryingSpan } from '@/lib/drying/types'

/** Share of a coat's water that is left at an instant, with its P10-P90 band. */
export type MoisturePoint = { at: number; likely: number; low: number; high: number; isForecast: boolean }

/**
 * A coat's drying as points for a chart: `count` of them from its start to `until`, and one at `now`.
 *
 * The band holds both doubts: the wettest line takes the low dose against the P90 need, the driest the high dose against the P10 need.
 *
 * Shape: points in order of time; ratios from 1 to 0. None where `until` is not after the start.
 * @source Page 1949, as in moistureRatio; the band is ours.
 */
export function dryingCurve({
  spans,
  call,
  start,
  until,
  now,
  moistureTarget,
  pageExponent,
  count,
}: {
  spans: readonly DryingSpan[]
  call: CoatCall
  start: number
  until: number
  now: number
  moistureTarget: number
  pageExponent?: number | undefined
  count: number
}): MoisturePoint[] {
  if (!(until > start)) return []
  const instants = Array.from({ length: count }, (_, index) => Math.round(start + ((until - start) * index) / (count - 1)))
  if (now > start && now < until) instants.push(now)
  return instants
    .toSorted((a, b) => a - b)
    .map((at) => {
      const dose = doseOverSpans(spans, call.creditedFrom, at)
      return {
        at,
        likely: moistureRatio(dose.likely, call.need.likely, moistureTarget, pageExponent),
        low: moistureRatio(dose.high, call.need.low, moistureTarget, pageExponent),
        high: moistureRatio(dose.low, call.need.high, moistureTarget, pageExponent),
        isForecast: at > now,
      }
    })
}
