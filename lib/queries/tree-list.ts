import { QueryTypes } from 'sequelize'
import type { Clock } from '@/lib/core/clock'
import { loadFloor } from '@/lib/queries/floor'
import { queueTree } from '@/lib/queue/assemble'
import type { TreeListRow } from '@/lib/trees/tree-list'
import { database } from '@/models'

type At = { clock: Clock }

/** Every tree on the floor, by tag. */
export async function loadTreeList({ clock }: At): Promise<TreeListRow[]> {
  return rowsOf({ on: 'floor' }, clock)
}

/** Those that were released to burnout since an instant, newest first, and still are. */
export async function loadReleasedSince({ since, most }: { since: number; most: number }, { clock }: At): Promise<TreeListRow[]> {
  const { rows } = await loadGoneTrees({ words: [], page: 1, size: most }, { clock })
  return rows.filter((tree) => tree.state === 'released' && (tree.stateSince ?? 0) > since)
}

/**
 * A page of the trees that have left, newest first: released and scrapped, whenever that was.
 *
 * @param words each must stand in the tag or in the name of a piece.
 * @returns one page and whether there is another behind it.
 */
export async function loadGoneTrees(
  { words, page, size }: { words: readonly string[]; page: number; size: number },
  { clock }: At,
): Promise<{ rows: TreeListRow[]; hasMore: boolean }> {
  const found = await database.query<{ id: string }>(
    // The index holds them in this order; without words no more is read than what is skipped and shown.
    `SELECT t.id FROM trees t
      WHERE coalesce(t.scrapped_at, t.released_at) IS NOT NULL
        AND NOT EXISTS (
          SELECT 1 FROM json_each(:words) w
           WHERE t.tag NOT LIKE w.value ESCAPE '!'
             AND NOT EXISTS (
               SELECT 1 FROM tree_pieces tp JOIN pieces p ON p.id = tp.piece_id JOIN sections s ON s.id = p.section_id JOIN works k ON k.id = s.work_id
                WHERE tp.tree_id = t.id AND (k.title || ', ' || s.name) LIKE w.value ESCAPE '!'))
      ORDER BY coalesce(t.scrapped_at, t.released_at) DESC LIMIT :limit OFFSET :offset`,
    {
      type: QueryTypes.SELECT,
      replacements: { words: JSON.stringify(words.map(likePattern)), limit: size + 1, offset: (page - 1) * size },
    },
  )
  const ids = found.slice(0, size).map(({ id }) => id)
  if (ids.length === 0) return { rows: [], hasMore: false }
  const rows = await rowsOf({ ids }, clock)
  return { rows: rows.toSorted((one, other) => ids.indexOf(one.id) - ids.indexOf(other.id)), hasMore: found.length > size }
}

function likePattern(word: string): string {
  return `%${word.replaceAll(/[!%_]/g, (sign) => `!${sign}`)}%`
}

async function rowsOf(trees: { on: 'floor' } | { ids: readonly string[] }, clock: Clock): Promise<TreeListRow[]> {
  const floor = await loadFloor({ now: clock.now(), trees })
  return floor.trees.map((tree) => ({ ...queueTree(tree, floor.context.places), recipeLabel: tree.facts.recipe.name }))
}
