import { millisecondsInMinute } from 'date-fns/constants'
import type { CheckedCoat } from '@/lib/calibration/left-out'

/** How well the times of some coats held. */
export type ForecastCheck = {
  count: number
  /** How many came dry between P10 and P90; of good times 80 % do. */
  inside: number
  /** Median of (came dry - likely), minutes: above 0 the likely times were early. Null without a coat. */
  biasMinutes: number | null
  /** Between these minutes lies the middle half. */
  middleHalf: readonly [number, number] | null
}

/** Of a log-normal need between P10 and P90. */
export const EXPECTED_INSIDE = 0.8
/** Fewer coats than this tell nothing. Our own. */
export const FEWEST_TO_TELL = 10

/** Counts how many coats came dry between P10 and P90, and how far off the likely times were. */
export function checkForecasts(coats: readonly CheckedCoat[]): ForecastCheck {
  const errors = coats.map(errorMinutes).toSorted((a, b) => a - b)
  const inside = coats.filter(isInside).length
  if (errors.length === 0) return { count: 0, inside, biasMinutes: null, middleHalf: null }
  return {
    count: coats.length,
    inside,
    biasMinutes: quantile(errors, 0.5),
    middleHalf: [quantile(errors, 0.25), quantile(errors, 0.75)],
  }
}

/** How much later than likely it came dry, minutes; below 0 it was earlier. */
export const errorMinutes = ({ outcome }: CheckedCoat): number =>
  ((outcome.dryAt ?? 0) - (outcome.forecast?.likelyAt ?? 0)) / millisecondsInMinute

/** Whether it came dry between P10 and P90, the ends with them. */
export const isInside = ({ dryHours, earliestHours, safeHours }: CheckedCoat): boolean => dryHours >= earliestHours && dryHours <= safeHours

/** @source linear interpolation between order statistics (Hyndman and Fan 1996, type 7). */
function quantile(sorted: readonly number[], share: number): number {
  const at = (sorted.length - 1) * share
  const [low, high] = [sorted[Math.floor(at)]!, sorted[Math.ceil(at)]!]
  return low + (high - low) * (at - Math.floor(at))
}

/** The same for each group of coats, largest group first. */
export function checkEach<Key>(coats: readonly CheckedCoat[], keyOf: (coat: CheckedCoat) => Key): { key: Key; check: ForecastCheck }[] {
  const groups = new Map<Key, CheckedCoat[]>()
  for (const coat of coats) groups.set(keyOf(coat), [...(groups.get(keyOf(coat)) ?? []), coat])
  return [...groups]
    .map(([key, group]) => ({ key, check: checkForecasts(group) }))
    .toSorted((one, other) => other.check.count - one.check.count)
}
