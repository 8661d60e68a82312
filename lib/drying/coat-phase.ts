import { millisecondsInMinute } from 'date-fns/constants'
import type { CoatCall, Instant } from '@/lib/drying/types'

/** How far along a coat is, from the dip on. 'unknown' is never shown as dry. */
const COAT_PHASES = ['wet', 'drying', 'nearly dry', 'dry', 'unknown'] as const
export type CoatPhase = (typeof COAT_PHASES)[number]

/** Above this moisture ratio a coat is wet. Our own starting value. */
const WET_MOISTURE_RATIO = 0.5

const NEARLY_DRY_MS = 30 * millisecondsInMinute

/**
 * The moisture word of a call: dry once its guard is reached; nearly dry when it is likely dry within 30 min, or likely dry
 * and waiting for the safe time; wet above a moisture ratio of 0.5; drying between.
 *
 * @source the words are ours, the limits our own starting values.
 */
export function coatPhase(call: CoatCall, now: Instant): CoatPhase {
  if (call.guardReachedAt !== null) return 'dry'
  if (call.isUnknown) return 'unknown'
  if (call.likelyAt !== null && call.likelyAt <= now + NEARLY_DRY_MS) return 'nearly dry'
  return call.moistureRatio > WET_MOISTURE_RATIO ? 'wet' : 'drying'
}
