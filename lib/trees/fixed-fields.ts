import type { TreeInput } from '@/lib/trees/tree-input'

export type TreeField = keyof TreeInput

/** Fields that may not be changed any more, each with the sentence that says why. */
export type FixedFields = Partial<Record<TreeField, string>>

/**
 * What stays as it is while a tree is edited: its tag always, and with the first coat on its recipe and its pieces. Recess and
 * spacing may be corrected: a core that was noticed late has to be waited for. The place is then moved on the tree's own page,
 * because the drying clock needs the hour.
 */
export function fixedFields(coatsOn: number): FixedFields {
  const tag = 'A tag is for one tree, for ever.'
  if (coatsOn === 0) return { tag }
  const since = coatsOn === 1 ? 'Fixed since coat 1 went on' : `Fixed: ${coatsOn} coats are on`
  return {
    tag,
    recipeVersionId: `${since}. A newer version is chosen on the tree’s page.`,
    pieces: `${since}. The log is about these pieces.`,
    placeId: 'Moved on the tree’s page, so that the drying clock knows the hour.',
  }
}
