import type { ReleaseCheck } from '@/lib/trees/detail-contract'
import type { Confirmation } from '@/lib/trees/tree-input'

export type ReleaseCandidate = { id: string; tag: string; checks: readonly ReleaseCheck[] }

/** True where the clock alone is not enough: touch, weight or temperature has to confirm that the shell is dry. */
export function needsConfirmation(checks: readonly ReleaseCheck[]): boolean {
  return checks.some((check) => check.code === 'confirmation' && !check.isMet)
}

/** Checks that no choice on this screen can meet: a missing coat, a wet shell, no look-over, a hold. */
export function blockingChecks(checks: readonly ReleaseCheck[]): ReleaseCheck[] {
  return checks.filter((check) => check.code !== 'confirmation' && !check.isMet)
}

/** What the release key says, and whether it may be held; while it is off its words name what is missing. */
export function releaseKey(
  chosen: readonly ReleaseCandidate[],
  confirmations: Readonly<Record<string, Confirmation | null>>,
): { isOff: boolean; text: string } {
  if (chosen.length === 0) return { isOff: true, text: 'Tick the trees to release' }
  const blocked = chosen.filter((tree) => blockingChecks(tree.checks).length > 0)
  if (blocked.length > 0) return { isOff: true, text: `${tags(blocked)}: see what is missing` }
  const unconfirmed = chosen.filter((tree) => needsConfirmation(tree.checks) && !confirmations[tree.id])
  if (unconfirmed.length > 0) {
    return { isOff: true, text: `Say how ${tags(unconfirmed)} ${unconfirmed.length === 1 ? 'was' : 'were'} confirmed` }
  }
  return { isOff: false, text: chosen.length === 1 ? `Hold to release ${chosen[0]?.tag}` : `Hold to release ${chosen.length} trees` }
}

function tags(candidates: readonly ReleaseCandidate[]): string {
  const shown = candidates.slice(0, 3).map((tree) => tree.tag)
  return candidates.length > 3 ? `${shown.join(', ')} and ${candidates.length - 3} more` : shown.join(', ')
}
