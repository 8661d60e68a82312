'use server'

import { revalidatePath } from 'next/cache'
import { redirect } from 'next/navigation'
import { z } from 'zod'
import { moveTreesToVersion } from '@/lib/commands/move-tree-recipe'
import { addRecipeVersion, createRecipe, renameRecipe, retireRecipe } from '@/lib/commands/save-recipe'
import { systemClock } from '@/lib/core/clock'
import { readRecipeForm } from '@/lib/recipes/recipe-form-values'
import { recipeInput, recipeName, recipeVersionInput } from '@/lib/recipes/recipe-input'
import { requireMember } from '@/lib/server/auth'
import { answerForm, type FormState } from '@/lib/server/form-state'
import { fieldErrors } from '@/lib/trees/tree-form-values'

const idInput = z.uuid()

/** Saves a new recipe and goes to its page. */
export async function createRecipeAction(_previous: FormState, form: FormData): Promise<FormState> {
  const member = await requireMember('recipes')
  const { name, note, coats } = readRecipeForm(form)
  const parsed = recipeInput.safeParse({ name, note, coats })
  if (!parsed.success) return { status: 'invalid', fields: fieldErrors(parsed.error) }
  return answerForm(async () => {
    const { recipeId } = await createRecipe(parsed.data, { member, clock: systemClock })
    revalidatePath('/', 'layout')
    redirect(`/recipes/${recipeId}`)
  })
}

/** Saves a further version and goes to it. */
export async function addVersionAction(recipeId: string, _previous: FormState, form: FormData): Promise<FormState> {
  const member = await requireMember('recipes')
  const { note, from, follows, coats } = readRecipeForm(form)
  const parsed = recipeVersionInput.safeParse({ note, from, follows, coats })
  if (!parsed.success) return { status: 'invalid', fields: fieldErrors(parsed.error) }
  return answerForm(async () => {
    await addRecipeVersion(idInput.parse(recipeId), parsed.data, { member, clock: systemClock })
    revalidatePath('/', 'layout')
    redirect(`/recipes/${recipeId}`)
  })
}

export async function renameRecipeAction(recipeId: string, _previous: FormState, form: FormData): Promise<FormState> {
  const member = await requireMember('recipes')
  const parsed = z.object({ name: recipeName }).safeParse({ name: form.get('name') ?? '' })
  if (!parsed.success) return { status: 'invalid', fields: fieldErrors(parsed.error) }
  return answerForm(async () => {
    await renameRecipe(idInput.parse(recipeId), parsed.data.name, { member, clock: systemClock })
    revalidatePath('/', 'layout')
    return { status: 'done', text: 'Renamed.' }
  })
}

export async function retireRecipeAction(recipeId: string, isRetired: boolean, _previous: FormState, _form: FormData): Promise<FormState> {
  const member = await requireMember('recipes')
  return answerForm(async () => {
    await retireRecipe(idInput.parse(recipeId), z.boolean().parse(isRetired), { member, clock: systemClock })
    revalidatePath('/', 'layout')
    return { status: 'done', text: isRetired ? 'Retired: new trees are not offered it any more.' : 'In use again.' }
  })
}

/** Moves the ticked trees to a version of their recipe: from the recipe's own page, and one from its tree's. */
export async function moveTreesAction(_previous: FormState, form: FormData): Promise<FormState> {
  const member = await requireMember('recipes')
  const parsed = z
    .object({ versionId: z.uuid('Choose a version.'), treeIds: z.array(z.uuid()).min(1, 'Tick the trees to move.').max(500) })
    .safeParse({ versionId: form.get('versionId') ?? '', treeIds: form.getAll('treeId') })
  if (!parsed.success) return { status: 'invalid', fields: fieldErrors(parsed.error) }
  return answerForm(async () => {
    const { tags, version } = await moveTreesToVersion(parsed.data, { member, clock: systemClock })
    revalidatePath('/', 'layout')
    return { status: 'done', text: `${tags.length === 1 ? tags[0] : `${tags.length} trees`} moved to version ${version}.` }
  })
}
