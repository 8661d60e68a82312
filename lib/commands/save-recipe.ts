import { col, fn, where } from 'sequelize'
import { addFoundryEvent } from '@/lib/commands/foundry-event'
import { refuseField } from '@/lib/commands/refuse-field'
import type { Clock } from '@/lib/core/clock'
import { newId } from '@/lib/core/ids'
import type { Actor } from '@/lib/members/actor'
import type { RecipeCoatInput, RecipeInput } from '@/lib/recipes/recipe-input'
import { Bath, inTransaction, Recipe, RecipeCoat, RecipeVersion } from '@/models'

type By = { member: Actor; clock: Clock }

/**
 * Adds a recipe with its version 1, not calibrated yet.
 *
 * @throws {AppError} conflict with `fields` when the name is taken, or for a bath that is unknown or retired (`coats.2.bathId`).
 */
export function createRecipe(input: RecipeInput, { member, clock }: By): Promise<{ recipeId: string; versionId: string }> {
  return inTransaction(async () => {
    const now = clock.now()
    await requireFreeName(input.name)
    const bathNames = await requireBaths(input.coats)
    const recipe = await Recipe.create({ id: newId(now), name: input.name, isDemo: member.isDemo ?? false, createdAt: now })
    const versionId = await addVersion(recipe.id, 1, { note: input.note, coats: input.coats, calibratedAt: null }, { member, now })
    await addFoundryEvent(
      { type: 'recipe', id: recipe.id, name: recipe.name },
      {
        kind: 'recipe added',
        by: member,
        at: now,
        text: `Recipe ${recipe.name} added, version 1 with ${input.coats.length} ${input.coats.length === 1 ? 'coat' : 'coats'}.`,
        after: { name: recipe.name, note: input.note, coats: namedCoats(input.coats, bathNames) },
      },
    )
    return { recipeId: recipe.id, versionId }
  })
}

/** Two names that differ in their capitals alone would be told apart by nobody. */
export async function requireFreeName(name: string, ofRecipeId?: string): Promise<void> {
  const holder = await Recipe.findOne({ where: where(fn('lower', col('name')), name.toLowerCase()) })
  if (holder && holder.id !== ofRecipeId) refuseField('name', `There is a recipe ${holder.name} already.`)
}

/** Names of the baths in use, by id. */
async function requireBaths(coats: readonly RecipeCoatInput[]): Promise<Map<string, string>> {
  const baths = new Map((await Bath.findAll()).map((bath) => [bath.id, bath]))
  for (const [index, coat] of coats.entries()) {
    const bath = baths.get(coat.bathId)
    if (!bath) refuseField(`coats.${index}.bathId`, 'There is no such bath.')
    if (bath.retiredAt !== null) refuseField(`coats.${index}.bathId`, `${bath.name} is retired: choose a bath in use.`)
  }
  return new Map([...baths].map(([id, { name }]) => [id, name]))
}

async function addVersion(
  recipeId: string,
  version: number,
  { note, coats, calibratedAt }: { note: string; coats: readonly RecipeCoatInput[]; calibratedAt: number | null },
  { member, now }: { member: Actor; now: number },
): Promise<string> {
  const id = newId(now)
  await RecipeVersion.create({ id, recipeId, version, note, calibratedAt, createdBy: member.id, createdAt: now })
  await RecipeCoat.bulkCreate(coats.map((coat, index) => ({ ...coat, recipeVersionId: id, number: index + 1 })))
  return id
}

/** Coats as the history keeps them: a bath by the name it had. */
function namedCoats(coats: readonly RecipeCoatInput[], bathNames: ReadonlyMap<string, string>) {
  return coats.map(({ bathId, ...coat }, index) => ({ number: index + 1, ...coat, bath: bathNames.get(bathId) ?? '' }))
}
