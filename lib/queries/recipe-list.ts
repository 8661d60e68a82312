import { QueryTypes } from 'sequelize'
import { loadVersionCoats, type StoredCoat } from '@/lib/queries/version-coats'
import { database } from '@/models'

export type RecipeListRow = {
  id: string
  name: string
  isRetired: boolean
  /** Of the demo, in a foundry that is not the demo itself. */
  isDemo: boolean
  /** Of the newest version. */
  version: number
  versionId: string
  isCalibrated: boolean
  coats: StoredCoat[]
  /** On any of its versions. */
  openTrees: number
}

/** Every recipe with its newest version, by name. */
export async function loadRecipeList(): Promise<RecipeListRow[]> {
  const rows = await database.query<
    Omit<RecipeListRow, 'coats' | 'isRetired' | 'isDemo' | 'isCalibrated'> & { isRetired: number; isDemo: number; isCalibrated: number }
  >(
    // By the small index of the floor: by their recipe, every tree there ever was would be read.
    `WITH open AS MATERIALIZED (
       SELECT recipe_version_id, count(*) AS trees FROM trees INDEXED BY trees_on_floor
        WHERE released_at IS NULL AND scrapped_at IS NULL GROUP BY recipe_version_id)
     SELECT r.id, r.name, r.retired_at IS NOT NULL AS isRetired, r.is_demo AND NOT (SELECT is_demo FROM foundry) AS isDemo, v.version, v.id AS versionId, v.calibrated_at IS NOT NULL AS isCalibrated,
            (SELECT coalesce(sum(o.trees), 0) FROM open o JOIN recipe_versions tv ON tv.id = o.recipe_version_id
              WHERE tv.recipe_id = r.id) AS openTrees
       FROM recipes r JOIN recipe_versions v ON v.recipe_id = r.id
      WHERE v.version = (SELECT max(version) FROM recipe_versions WHERE recipe_id = r.id) ORDER BY r.name COLLATE NOCASE`,
    { type: QueryTypes.SELECT },
  )
  const coats = await loadVersionCoats(rows.map((row) => row.versionId))
  return rows.map((row) => ({
    ...row,
    isRetired: row.isRetired === 1,
    isDemo: row.isDemo === 1,
    isCalibrated: row.isCalibrated === 1,
    coats: coats.get(row.versionId) ?? [],
  }))
}
