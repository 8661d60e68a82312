import type { CoatKind, Guard, Stucco } from '@/lib/coats/vocabulary'
import {
  DEFAULT_LAST_MOISTURE_TARGET,
  DEFAULT_LONGEST_WAIT_HOURS,
  DEFAULT_MOISTURE_TARGET,
  defaultReferenceHours,
} from '@/lib/drying/recipe-defaults'

/** A coat as a recipe begins with it, before anybody has calibrated it; which bath it is comes by the kind of bath. */
export type StartingCoat = {
  kind: CoatKind
  bathKind: 'face' | 'backup'
  stucco: Stucco
  needReferenceHours: number
  moistureTarget: number
  guard: Guard
  drainSeconds: number
  longestWaitHours: number
  isPrewet: boolean
  readAloud: string
}

/** What a coat is and what is read aloud at its dip. */
export type CoatLine = { kind: CoatKind; stucco: Stucco; readAloud: string }

/** Common practice, no source. */
const DRAIN_SECONDS: Record<CoatKind, number> = { face: 75, backup: 40, 'core fill': 60, seal: 45 }

/**
 * Coats from lines, inner one first: needs, targets and waits are our own starting values, so that nothing in them claims to be calibrated.
 *
 * @example startingCoats([{ kind: 'face', stucco: 'fine', readAloud: '' }])[0]?.needReferenceHours // => 2.5
 */
export function startingCoats(lines: readonly CoatLine[]): StartingCoat[] {
  return lines.map(({ kind, stucco, readAloud }, index) => ({
    kind,
    bathKind: kind === 'face' ? 'face' : 'backup',
    stucco,
    needReferenceHours: defaultReferenceHours(kind, lines.slice(0, index).filter((earlier) => earlier.kind === kind).length),
    moistureTarget: kind === 'seal' ? DEFAULT_LAST_MOISTURE_TARGET : DEFAULT_MOISTURE_TARGET,
    guard: kind === 'face' || kind === 'seal' ? 'safe' : 'likely',
    drainSeconds: DRAIN_SECONDS[kind],
    longestWaitHours: DEFAULT_LONGEST_WAIT_HOURS[kind],
    isPrewet: index > 0 && kind !== 'core fill',
    readAloud,
  }))
}
