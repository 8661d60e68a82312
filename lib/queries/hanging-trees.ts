import { QueryTypes } from 'sequelize'
import { database } from '@/models'

/** Tags of the trees on the floor by the place where they hang, in order; a place without a tree is not in it. */
export async function hangingTrees(): Promise<Map<string, string[]>> {
  const rows = await database.query<{ tag: string; placeId: string }>(
    `SELECT t.tag, p.place_id AS placeId FROM trees t
       JOIN tree_places p ON p.id = (
         SELECT id FROM tree_places WHERE tree_id = t.id AND withdrawn_at IS NULL ORDER BY since DESC, id DESC LIMIT 1)
      WHERE t.released_at IS NULL AND t.scrapped_at IS NULL ORDER BY t.tag`,
    { type: QueryTypes.SELECT },
  )
  const tags = new Map<string, string[]>()
  for (const { tag, placeId } of rows) tags.set(placeId, [...(tags.get(placeId) ?? []), tag])
  return tags
}
