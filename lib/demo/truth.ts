import type { CoatKind } from '@/lib/coats/vocabulary'
import type { Random } from '@/lib/demo/random'

/** What the coats of this shop really need, against the starting values. */
const TRUE_FACTOR: Record<CoatKind, number> = { face: 1, backup: 1.2, 'core fill': 1.2, seal: 1.05 }
const SCATTER = 0.15

/** What one coat really needs against its starting value: the shop's own factor with the scatter between coats. */
export function drawTruth(kind: CoatKind, random: Random): number {
  // Six uniform numbers come close to a normal one, and never lie far out.
  const noise = Array.from({ length: 6 }, () => random() - 0.5).reduce((sum, value) => sum + value, 0) * Math.SQRT2
  return TRUE_FACTOR[kind] * Math.exp(SCATTER * noise)
}

/** Nobody dips over a coat before so much of its true need. */
export const WAITED_SHARE = 1.2
