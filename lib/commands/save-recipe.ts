import { addFoundryEvent } from '@/lib/commands/foundry-event'
import { refuseField } from '@/lib/commands/refuse-field'
import { retiredBaths } from '@/lib/commands/retired-baths'
import { stopBeingDemo } from '@/lib/commands/stop-being-demo'
import { writeVersion } from '@/lib/commands/write-version'
import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import { newId } from '@/lib/core/ids'
import { DEFAULT_SIGMA } from '@/lib/drying/need'
import { isSameName } from '@/lib/format/same-name'
import type { Actor } from '@/lib/members/actor'
import { changedFields } from '@/lib/members/changed-fields'
import { loadVersionCoats } from '@/lib/queries/version-coats'
import { coatCells } from '@/lib/recipes/coat-cells'
import type { RecipeCoatInput, RecipeInput, RecipeVersionInput } from '@/lib/recipes/recipe-input'
import { differencesInShort, hasDifferences, sameNeeds, versionDifferences } from '@/lib/recipes/version-differences'
import { Bath, inTransaction, Member, Recipe, RecipeVersion } from '@/models'

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
    const coats = await withBaths(input.coats)
    const recipe = await Recipe.create({ id: newId(now), name: input.name, isDemo: member.isDemo ?? false, createdAt: now })
    const versionId = await writeVersion(recipe.id, 1, { note: input.note, coats: input.coats, calibratedAt: null }, { member, now })
    await addFoundryEvent(
      { type: 'recipe', id: recipe.id, name: recipe.name },
      {
        kind: 'recipe added',
        by: member,
        at: now,
        text: `Recipe ${recipe.name} added, version 1 with ${coats.length} ${coats.length === 1 ? 'coat' : 'coats'}.`,
        after: { name: recipe.name, note: input.note, coats: numbered(coats) },
      },
    )
    return { recipeId: recipe.id, versionId }
  })
}

/**
 * Adds the next version of a recipe; the versions before it stay as they are, and so do the trees that stand on them. It is
 * calibrated only where the version it was filled from is, coat by coat, and nothing differs that a need rests on.
 *
 * @throws {AppError} not_found; conflict when somebody made a version meanwhile or nothing differs from the newest one, and with
 *   `fields` for a bath that is unknown or retired.
 */
export function addRecipeVersion(
  recipeId: string,
  input: RecipeVersionInput,
  { member, clock }: By,
): Promise<{ versionId: string; version: number; isCalibrated: boolean }> {
  return inTransaction(async () => {
    const now = clock.now()
    const recipe = await findRecipe(recipeId)
    const versions = await RecipeVersion.findAll({ where: { recipeId }, order: [['version', 'DESC']] })
    const newest = versions[0]
    const from = versions.find(({ version }) => version === input.from)
    if (!newest || !from) throw new AppError('not_found', 'There is no such version.')
    if (newest.version !== input.follows) {
      const maker = newest.createdBy === null ? null : await Member.findByPk(newest.createdBy)
      const who = maker ? `${maker.name} made` : 'There is'
      throw new AppError('conflict', `${who} version ${newest.version} meanwhile. Look at it first: what you typed is still here.`)
    }
    const coats = await withBaths(input.coats)
    const known = await loadVersionCoats([newest.id, from.id])
    const cells = coats.map(coatCells)
    const before = known.get(newest.id) ?? []
    const differences = versionDifferences(before.map(coatCells), cells)
    if (!hasDifferences(differences)) {
      throw new AppError('conflict', `Nothing differs from version ${newest.version}: a new version needs a difference.`)
    }
    const filledFrom = known.get(from.id) ?? []
    const kept = sameNeeds(filledFrom.map(coatCells), cells)
    const areAllKept = kept.every((index) => index !== null)
    const calibratedAt = areAllKept ? from.calibratedAt : null
    const calibrated = coats.map((coat, index) => {
      const like = kept[index] == null ? undefined : filledFrom[kept[index]]
      return { ...coat, needSpread: like?.needSpread ?? DEFAULT_SIGMA, calibratedByCoats: like?.calibratedByCoats ?? null }
    })
    const version = newest.version + 1
    const versionId = await writeVersion(
      recipeId,
      version,
      { note: input.note, coats: calibrated.map(({ bathName: _bathName, ...coat }) => coat), calibratedAt },
      { member, now },
    )
    await addFoundryEvent(
      { type: 'recipe', id: recipeId, name: recipe.name },
      {
        kind: 'recipe version added',
        by: member,
        at: now,
        text: `Version ${version} of ${recipe.name}: ${differencesInShort(differences)}. ${input.note}`,
        ...changedFields(
          { version: newest.version, coats: numbered(before), isCalibrated: newest.calibratedAt !== null },
          { version, coats: numbered(calibrated), isCalibrated: calibratedAt !== null },
        ),
      },
    )
    return { versionId, version, isCalibrated: calibratedAt !== null }
  })
}

/** Gives a recipe another name. @throws {AppError} not_found; conflict with `fields` when the name is taken. */
export function renameRecipe(recipeId: string, name: string, { member, clock }: By): Promise<void> {
  return inTransaction(async () => {
    const recipe = await findRecipe(recipeId)
    if (recipe.name === name) return
    await requireFreeName(name, recipeId)
    const before = recipe.name
    await recipe.update({ name })
    await stopBeingDemo(recipe, member)
    await addFoundryEvent(
      { type: 'recipe', id: recipeId, name },
      {
        kind: 'recipe renamed',
        by: member,
        at: clock.now(),
        text: `Recipe ${before} is called ${name} now.`,
        before: { name: before },
        after: { name },
      },
    )
  })
}

/**
 * Retires a recipe, or takes it into use again. New trees are not offered a retired one; those that stand on it go on.
 *
 * @throws {AppError} not_found; conflict when one that would be used again needs a bath that is retired.
 */
export function retireRecipe(recipeId: string, isRetired: boolean, { member, clock }: By): Promise<void> {
  return inTransaction(async () => {
    const recipe = await findRecipe(recipeId)
    if ((recipe.retiredAt !== null) === isRetired) return
    const now = clock.now()
    if (!isRetired) await requireBathsOfNewest(recipeId)
    const before = recipe.retiredAt
    await recipe.update({ retiredAt: isRetired ? now : null })
    await stopBeingDemo(recipe, member)
    await addFoundryEvent(
      { type: 'recipe', id: recipeId, name: recipe.name },
      {
        kind: isRetired ? 'recipe retired' : 'recipe taken into use',
        by: member,
        at: now,
        text: isRetired ? `Recipe ${recipe.name} retired.` : `Recipe ${recipe.name} taken into use again.`,
        before: { retiredAt: before },
        after: { retiredAt: recipe.retiredAt },
      },
    )
  })
}

async function findRecipe(recipeId: string): Promise<Recipe> {
  const recipe = await Recipe.findByPk(recipeId)
  if (!recipe) throw new AppError('not_found', 'There is no such recipe.')
  return recipe
}

async function requireBathsOfNewest(recipeId: string): Promise<void> {
  const newest = await RecipeVersion.findOne({ where: { recipeId }, order: [['version', 'DESC']], rejectOnEmpty: true })
  const refusal = await retiredBaths(newest.id)
  if (refusal !== null) throw new AppError('conflict', refusal)
}

async function requireFreeName(name: string, ofRecipeId?: string): Promise<void> {
  const namesake = (await Recipe.findAll()).find((recipe) => recipe.id !== ofRecipeId && isSameName(recipe.name, name))
  if (namesake) refuseField('name', `There is a recipe ${namesake.name} already.`)
}

type NamedCoat = RecipeCoatInput & { bathName: string }

/** The coats with the names of their baths, each of which has to be in use. */
async function withBaths(coats: readonly RecipeCoatInput[]): Promise<NamedCoat[]> {
  const baths = new Map((await Bath.findAll()).map((bath) => [bath.id, bath]))
  return coats.map((coat, index) => {
    const bath = baths.get(coat.bathId)
    if (!bath) refuseField(`coats.${index}.bathId`, 'There is no such bath.')
    if (bath.retiredAt !== null) refuseField(`coats.${index}.bathId`, `${bath.name} is retired: choose a bath in use.`)
    return { ...coat, bathName: bath.name }
  })
}

/** Coats as the history keeps them: a bath by the name it had. */
const numbered = (coats: readonly NamedCoat[]) =>
  coats.map(({ bathId: _bathId, bathName, ...coat }, index) => ({ ...coat, number: index + 1, bath: bathName }))
