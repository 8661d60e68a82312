import type { TreeInput } from '@/lib/trees/tree-input'

export type TreeField = keyof TreeInput

/** Fields that may not be changed any more, each with the sentence that says why. */
export type FixedFields = Partial<Record<TreeField, string>>

/**
 * What stays as it is while a tree is edited.
 *
 * The place is moved on the tree's own page, because the drying clock needs the hour. Once a coat is on, the log is
 * written against tag and recipe. Recess and spacing stay open on purpose: a recess found late has to count.
 */
export function fixedFields(coatsOn: number): FixedFields {
  const moved = 'Moved on the tree’s page, with the hour of the move.'
  if (coatsOn === 0) return { placeId: moved }
  const since = coatsOn === 1 ? 'Fixed since coat 1 went on' : `Fixed: ${coatsOn} coats are on`
  return {
    placeId: moved,
    tag: `${since}. Labels and the log name this tag.`,
    recipeVersionId: `${since}. Their needs and targets come from this recipe.`,
  }
}

/** What a change of recess or spacing does once coats are on; null before. */
export function lateChangeHint(coatsOn: number): string | null {
  return coatsOn === 0 ? null : 'A change counts from the next coat on; coats that are on keep the need they were dipped with.'
}
