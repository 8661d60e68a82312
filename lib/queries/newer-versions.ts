import { QueryTypes } from 'sequelize'
import { loadMovingTrees } from '@/lib/queries/moving-trees'
import { loadVersionCoats } from '@/lib/queries/version-coats'
import type { VersionCoat } from '@/lib/recipes/coat-cells'
import { moveRefusal } from '@/lib/recipes/move-rules'
import { database } from '@/models'

export type NewerVersion = { versionId: string; version: number; note: string; coats: VersionCoat[]; refusal: string | null }

/** Versions of a tree's recipe that are newer than its own, newest first, each with what stands against a move; none for a tree that has left. */
export async function loadNewerVersions(treeId: string): Promise<NewerVersion[]> {
  const [tree] = await loadMovingTrees({ ids: [treeId] })
  if (!tree || tree.isReleased || tree.isScrapped) return []
  const versions = await database.query<{ versionId: string; version: number; note: string }>(
    'SELECT id AS versionId, version, note FROM recipe_versions WHERE recipe_id = :recipeId AND version > :version ORDER BY version DESC',
    { type: QueryTypes.SELECT, replacements: { recipeId: tree.recipeId, version: tree.version } },
  )
  const coatsOf = await loadVersionCoats(versions.map(({ versionId }) => versionId))
  return versions.map((row) => {
    const coats = coatsOf.get(row.versionId) ?? []
    const refusal = moveRefusal(tree, { recipeId: tree.recipeId, version: row.version, coatCount: coats.length })
    return { ...row, coats, refusal }
  })
}
