import { QueryTypes } from 'sequelize'
import { loadMovingTrees, type RecipeTree } from '@/lib/queries/moving-trees'
import { loadVersionCoats, type StoredCoat } from '@/lib/queries/version-coats'
import { Bath, database, Foundry, Recipe } from '@/models'

export type RecipeVersionRow = {
  id: string
  version: number
  note: string
  by: string | null
  at: number
  isCalibrated: boolean
  coats: StoredCoat[]
  /** By tag. */
  openTrees: RecipeTree[]
  /** Trees that were released or scrapped on it. */
  leftTrees: number
}

export type RecipeDetail = {
  id: string
  name: string
  isRetired: boolean
  /** Of the demo, in a foundry that is not the demo itself. */
  isDemo: boolean
  /** Newest first; a recipe has at least one. */
  versions: RecipeVersionRow[]
}

/** A recipe with all its versions and the trees that stand on each; null when there is no such recipe. */
export async function loadRecipeDetail(recipeId: string): Promise<RecipeDetail | null> {
  const recipe = await Recipe.findByPk(recipeId)
  if (!recipe) return null
  const [rows, trees, foundry] = await Promise.all([
    database.query<{
      id: string
      version: number
      note: string
      by: string | null
      at: number
      calibratedAt: number | null
      leftTrees: number
    }>(
      // Counted within the indexes of the versions and of the floor; no tree that has left is read.
      `WITH open AS MATERIALIZED (
         SELECT recipe_version_id, count(*) AS trees FROM trees INDEXED BY trees_on_floor
          WHERE released_at IS NULL AND scrapped_at IS NULL GROUP BY recipe_version_id)
       SELECT v.id, v.version, v.note, m.name AS "by", v.created_at AS at, v.calibrated_at AS calibratedAt,
              (SELECT count(*) FROM trees t WHERE t.recipe_version_id = v.id)
                - coalesce((SELECT o.trees FROM open o WHERE o.recipe_version_id = v.id), 0) AS leftTrees
         FROM recipe_versions v LEFT JOIN members m ON m.id = v.created_by WHERE v.recipe_id = :recipeId ORDER BY v.version DESC`,
      { type: QueryTypes.SELECT, replacements: { recipeId } },
    ),
    loadMovingTrees({ recipeId }),
    Foundry.findByPk(1),
  ])
  const coats = await loadVersionCoats(rows.map((row) => row.id))
  return {
    id: recipe.id,
    name: recipe.name,
    isRetired: recipe.retiredAt !== null,
    isDemo: recipe.isDemo && foundry?.isDemo !== true,
    versions: rows.map(({ calibratedAt, ...row }) => ({
      ...row,
      isCalibrated: calibratedAt !== null,
      coats: coats.get(row.id) ?? [],
      openTrees: trees.filter((tree) => tree.versionId === row.id),
    })),
  }
}

export type BathChoice = { id: string; name: string; kind: 'face' | 'backup'; isRetired: boolean }

/** Every bath there has been, those in use first: an old version may name one that is retired since. */
export async function loadBathChoices(): Promise<BathChoice[]> {
  const baths = await Bath.findAll({ order: [['name', 'ASC']] })
  return baths
    .map(({ id, name, kind, retiredAt }) => ({ id, name, kind, isRetired: retiredAt !== null }))
    .toSorted((one, other) => Number(one.isRetired) - Number(other.isRetired))
}
