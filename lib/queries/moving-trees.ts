import { QueryTypes } from 'sequelize'
import type { MovingTree } from '@/lib/recipes/move-rules'
import { database } from '@/models'

export type RecipeTree = MovingTree & { id: string; versionId: string; isHeld: boolean }

type Row = Omit<RecipeTree, 'hasSeal' | 'isReleased' | 'isScrapped' | 'isHeld'> &
  Record<'hasSeal' | 'isReleased' | 'isScrapped' | 'isHeld', number>

/** Trees as far as a move to another version asks about them, by tag: some by id, or the open ones that stand on one recipe. */
export async function loadMovingTrees(selection: { ids: readonly string[] } | { recipeId: string }): Promise<RecipeTree[]> {
  const where =
    'ids' in selection
      ? 't.id IN (SELECT value FROM json_each(:ids))'
      : 'v.recipe_id = :recipeId AND t.released_at IS NULL AND t.scrapped_at IS NULL'
  // By their recipe, every tree there ever was would be read.
  const index = 'ids' in selection ? '' : 'INDEXED BY trees_on_floor'
  const rows = await database.query<Row>(
    `SELECT t.id, t.tag, v.id AS versionId, v.version, v.recipe_id AS recipeId, t.released_at IS NOT NULL AS isReleased,
            t.scrapped_at IS NOT NULL AS isScrapped,
            (SELECT count(*) FROM coats c WHERE c.tree_id = t.id AND c.withdrawn_at IS NULL) AS coatsOn,
            EXISTS (SELECT 1 FROM coats c WHERE c.tree_id = t.id AND c.withdrawn_at IS NULL AND c.kind = 'seal') AS hasSeal,
            EXISTS (SELECT 1 FROM holds h WHERE h.tree_id = t.id AND h.lifted_at IS NULL) AS isHeld
       FROM trees t ${index} JOIN recipe_versions v ON v.id = t.recipe_version_id WHERE ${where} ORDER BY t.tag`,
    { type: QueryTypes.SELECT, replacements: 'ids' in selection ? { ids: JSON.stringify(selection.ids) } : selection },
  )
  return rows
    .map((row) => ({
      ...row,
      hasSeal: row.hasSeal === 1,
      isReleased: row.isReleased === 1,
      isScrapped: row.isScrapped === 1,
      isHeld: row.isHeld === 1,
    }))
    .toSorted((one, other) => one.tag.localeCompare(other.tag, 'en', { numeric: true }))
}
