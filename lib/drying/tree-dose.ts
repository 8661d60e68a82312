import { DOSE_EPSILON, instantAtDose, NO_DOSE, roomDose } from '@/lib/drying/room-curve'
import type { Dose, DryingSpan, Instant } from '@/lib/drying/types'

/**
 * Dose of a tree over its stays: the sum of place factor x dose of the room, reference hours. Zero where `to` is not after `from`.
 *
 * @source our own model: a place speeds the room's drying up or slows it down, whatever the air.
 */
export function doseOverSpans(spans: readonly DryingSpan[], from: Instant, to: Instant): Dose {
  let sum = NO_DOSE
  for (const span of spans) {
    const dose = roomDose(span.curve, Math.max(from, span.from), Math.min(to, span.to))
    sum = addDose(sum, dose, span.placeFactor)
  }
  return sum
}

/**
 * First whole millisecond at which a tree has taken `amount` reference hours since `from`, on the likely dose or one of its
 * bounds; null when its spans end first.
 */
export function instantWhenDose(spans: readonly DryingSpan[], from: Instant, amount: number, bound: keyof Dose): Instant | null {
  if (!(amount > 0)) return from
  let rest = amount
  for (const span of spans) {
    const start = Math.max(from, span.from)
    const dose = span.placeFactor * roomDose(span.curve, start, span.to)[bound]
    if (dose > 0 && dose >= rest - DOSE_EPSILON) {
      const at = instantAtDose(span.curve, start, Math.min(rest, dose) / span.placeFactor, bound)
      return at === null ? span.to : Math.min(at, span.to)
    }
    rest -= dose
  }
  return null
}

/** Sum of two doses, the second one weighted. */
function addDose(sum: Dose, dose: Dose, weight: number): Dose {
  return { likely: sum.likely + weight * dose.likely, low: sum.low + weight * dose.low, high: sum.high + weight * dose.high }
}
