import { newId } from '@/lib/core/ids'
import type { Actor } from '@/lib/members/actor'
import type { RecipeCoatInput } from '@/lib/recipes/recipe-input'
import { RecipeCoat, RecipeVersion } from '@/models'

/** A coat with what stands behind its need; starting values where that is left out. */
export type CoatToWrite = RecipeCoatInput & { needSpread?: number; calibratedByCoats?: number | null }

/** Writes a version of a recipe with its coats, inner coat first. Takes part in the caller's transaction. */
export async function writeVersion(
  recipeId: string,
  version: number,
  { note, coats, calibratedAt }: { note: string; coats: readonly CoatToWrite[]; calibratedAt: number | null },
  { member, now }: { member: Actor; now: number },
): Promise<string> {
  const id = newId(now)
  await RecipeVersion.create({ id, recipeId, version, note, calibratedAt, createdBy: member.id, createdAt: now })
  await RecipeCoat.bulkCreate(coats.map((coat, index) => ({ ...coat, recipeVersionId: id, number: index + 1 })))
  return id
}
