/** A tree as far as its move to another version of its recipe asks about it. */
export type MovingTree = {
  tag: string
  recipeId: string
  version: number
  coatsOn: number
  hasSeal: boolean
  isReleased: boolean
  isScrapped: boolean
}

/**
 * Why a tree cannot move to this version of a recipe; null when it can. Coats that are on stay as they are, so there has to be
 * something left to dip: a shell whose last coat was put on as a middle one has been dried less than burnout needs.
 */
export function moveRefusal(tree: MovingTree, to: { recipeId: string; version: number; coatCount: number }): string | null {
  if (tree.isScrapped) return `${tree.tag} was scrapped.`
  if (tree.isReleased) return `${tree.tag} was released to burnout and has left the floor.`
  if (tree.recipeId !== to.recipeId) return `${tree.tag} stands on another recipe.`
  if (tree.version === to.version) return `${tree.tag} stands on version ${to.version} already.`
  if (tree.version > to.version) return `${tree.tag} stands on version ${tree.version}: a tree moves to a newer version only.`
  if (tree.hasSeal) return `${tree.tag} has its seal on: nothing more goes onto it.`
  if (tree.coatsOn < to.coatCount) return null
  const coats = to.coatCount === 1 ? 'coat' : 'coats'
  return tree.coatsOn > to.coatCount
    ? `${tree.tag} has ${tree.coatsOn} on, and version ${to.version} has only ${to.coatCount} ${coats}.`
    : `${tree.tag} has all ${to.coatCount} ${coats} of version ${to.version} on: nothing of it would be left to dip.`
}
