import { createRecipe } from '@/lib/commands/save-recipe'
import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import type { Actor } from '@/lib/members/actor'
import { STARTER_RECIPES, type StarterKey } from '@/lib/recipes/starter-recipes'
import { Bath, inTransaction, Recipe } from '@/models'

/**
 * Adds some of the recipes to begin with, on the foundry's first face bath and its first backup bath. One that is there already is left out.
 *
 * @returns names of those that were added.
 * @throws {AppError} unprocessable while one of the baths is missing.
 */
export function takeStarterRecipes(keys: readonly StarterKey[], { member, clock }: { member: Actor; clock: Clock }): Promise<string[]> {
  return inTransaction(async () => {
    const baths = await Bath.findAll({ where: { retiredAt: null, isDemo: member.isDemo ?? false }, order: [['createdAt', 'ASC']] })
    const bathOf = (kind: 'face' | 'backup') => {
      const bath = baths.find((candidate) => candidate.kind === kind)
      if (!bath) throw new AppError('unprocessable', `Add a ${kind} bath first.`)
      return bath.id
    }
    const bathIds = { face: bathOf('face'), backup: bathOf('backup') }
    const known = new Set((await Recipe.findAll()).map(({ name }) => name))
    const wanted = STARTER_RECIPES.filter(({ key, name }) => keys.includes(key) && !known.has(name))
    for (const { name, coats } of wanted) {
      const note = 'A recipe to begin with: its needs are starting values, not calibrated yet.'
      await createRecipe(
        { name, note, coats: coats.map(({ bathKind, ...coat }) => ({ ...coat, bathId: bathIds[bathKind] })) },
        { member, clock },
      )
    }
    return wanted.map(({ name }) => name)
  })
}
