import { QueryTypes } from 'sequelize'
import { nameList } from '@/lib/format/name-list'
import { database } from '@/models'

/**
 * What stands against dipping by a version of a recipe: a bath of it that is retired. Nobody may come to stand on such a version anew,
 * neither a tree nor, with its newest one, a recipe that is taken into use again.
 *
 * @returns a sentence that names the baths; null when all of them are in use.
 */
export async function retiredBaths(versionId: string): Promise<string | null> {
  const rows = await database.query<{ name: string }>(
    `SELECT DISTINCT b.name FROM recipe_coats c JOIN baths b ON b.id = c.bath_id
      WHERE c.recipe_version_id = :versionId AND b.retired_at IS NOT NULL ORDER BY b.name`,
    { type: QueryTypes.SELECT, replacements: { versionId } },
  )
  if (rows.length === 0) return null
  const [verb, them] = rows.length === 1 ? ['is', 'it'] : ['are', 'them']
  return `${nameList(rows.map(({ name }) => name))} ${verb} retired: take ${them} into use again first.`
}
