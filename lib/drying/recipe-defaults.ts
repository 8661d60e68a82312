import type { CoatKind } from '@/lib/coats/vocabulary'

/** Moisture ratio at which a coat may be dipped over, and the drier one before burnout. Our own starting values, to be calibrated. */
export const DEFAULT_MOISTURE_TARGET = 0.1
export const DEFAULT_LAST_MOISTURE_TARGET = 0.05

/** Longest wait of a wet coat before the next dip, hours: a face coat powders, a backup coat overdries. Common practice, no source. */
export const DEFAULT_LONGEST_WAIT_HOURS: Record<CoatKind, number> = { face: 24, backup: 72, 'core fill': 72, seal: 72 }

/** A backup coat dries through the shell below it: its need rises by this share a coat. Our own starting value, to be calibrated. */
const BACKUP_RISE = 0.04

/**
 * Reference hours of a starter recipe's coat to its moisture target, its own stucco included.
 *
 * @param index 0 for the first coat of this kind on the shell, 1 for the second, and so on.
 * @returns face 2.5, then 3.0; backup 4.0 rising by 4 % a coat; core fill 10; seal 12 (to a moisture target of 0.05).
 * @source our own starting values, to be calibrated within the first twenty to thirty coats. Anchor for 4.0: Dooley and Everden,
 *   INCAST Nov 2020, found little strength gained after 4 h in a room that gives 3.7 reference hours in that time.
 */
export function defaultReferenceHours(kind: CoatKind, index: number): number {
  if (kind === 'face') return index === 0 ? 2.5 : 3
  if (kind === 'backup') return 4 * (1 + BACKUP_RISE) ** index
  return kind === 'core fill' ? 10 : 12
}
