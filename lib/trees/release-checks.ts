import { isDriedOut } from '@/lib/trees/assess'
import type { DerivedTree } from '@/lib/trees/derive'
import type { ReleaseCheck } from '@/lib/trees/detail-contract'
import type { Confirmation } from '@/lib/trees/tree-input'

/** Warnings under which the clock alone is not enough to release a shell. */
const NEEDS_CONFIRMATION = new Set(['damp room', 'damp in store', 'confirm first', 'unknown', 'said not yet'])

/** Whether a person has to confirm dryness by touch, weight or temperature before the release. */
export function needsConfirmation(tree: DerivedTree): boolean {
  const isSafeByClock = tree.call?.isSafeDry ?? false
  return !isSafeByClock || tree.warnings.some((warning) => NEEDS_CONFIRMATION.has(warning.code))
}

/**
 * What stands between a tree and its release to burnout. A shell that is not dried out cannot be confirmed away:
 * damp shells and molten metal kill.
 */
export function releaseChecks(tree: DerivedTree, confirmation: Confirmation | null): ReleaseCheck[] {
  const { facts } = tree
  const toCome = facts.recipe.coats.length - facts.coats.length
  const isDry = tree.isLastOn && tree.call !== null && isDriedOut(facts, tree.call)
  const checks: ReleaseCheck[] = [
    {
      code: 'coats',
      isMet: tree.isLastOn,
      text: tree.isLastOn ? 'Every coat of the recipe is on.' : `${toCome} more to come by the recipe.`,
    },
    { code: 'dry', isMet: isDry, text: isDry ? 'The last coat is dried out.' : 'The last coat is not dried out.' },
    {
      code: 'look-over',
      isMet: facts.lookedOverAt !== null,
      text: facts.lookedOverAt === null ? 'Nobody has looked it over since it dried out.' : 'Looked over since it dried out.',
    },
    { code: 'hold', isMet: facts.hold === null, text: facts.hold ? `Held by ${facts.hold.by}: ${facts.hold.reason}` : 'No hold is open.' },
  ]
  if (!isDry || !needsConfirmation(tree)) return checks
  return [
    ...checks,
    {
      code: 'confirmation',
      isMet: confirmation !== null,
      text: confirmation
        ? `Dryness confirmed by ${confirmation}.`
        : 'The clock alone is not enough here: confirm dryness by touch, weight or temperature.',
    },
  ]
}
