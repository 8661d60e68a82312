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
  const found = await database.query<{ id: string }>(
    `SELECT id FROM trees
      WHERE coalesce(scrapped_at, released_at) > :since AND coalesce(scrapped_at, released_at) IS NOT NULL AND scrapped_at IS NULL
      ORDER BY coalesce(scrapped_at, released_at) DESC, id DESC LIMIT :most`,
    { type: QueryTypes.SELECT, replacements: { since, most } },
  )
  return inOrder(found, clock)
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
  const found = await findGone({ words, behind: NEWEST, limit: size + 1, offset: (page - 1) * size })
  return { rows: await inOrder(found.slice(0, size), clock), hasMore: found.length > size }
}

/** Where a tree stands among those that left: by the instant it left, then its id. */
export type GoneKey = { leftAt: number; id: string }

/**
 * The trees that left before the one of a key, as loadGoneTrees orders and finds them. A list that is taken key by key costs the same
 * for every part, and has each tree once however many leave meanwhile.
 *
 * @param behind null for the first part.
 * @returns the part, and the key that the next one lies behind; null at the end.
 */
export async function loadGoneBehind(
  { words, behind, most }: { words: readonly string[]; behind: GoneKey | null; most: number },
  { clock }: At,
): Promise<{ rows: TreeListRow[]; next: GoneKey | null }> {
  const found = await findGone({ words, behind: behind ?? NEWEST, limit: most + 1, offset: 0 })
  const part = found.slice(0, most)
  return { rows: await inOrder(part, clock), next: found.length > most ? (part.at(-1) ?? null) : null }
}

/** Before every tree. */
const NEWEST: GoneKey = { leftAt: Number.MAX_SAFE_INTEGER, id: '' }

function findGone(asked: { words: readonly string[]; behind: GoneKey; limit: number; offset: number }): Promise<GoneKey[]> {
  const { words, behind, limit, offset } = asked
  return database.query<GoneKey>(
    // The index holds them in this order; without words no more is read than what is skipped and shown.
    `SELECT t.id, coalesce(t.scrapped_at, t.released_at) AS leftAt FROM trees t
      WHERE coalesce(t.scrapped_at, t.released_at) IS NOT NULL
        AND coalesce(t.scrapped_at, t.released_at) <= :leftAt AND (coalesce(t.scrapped_at, t.released_at) < :leftAt OR t.id < :id)
        AND NOT EXISTS (
          SELECT 1 FROM json_each(:words) w
           WHERE t.tag NOT LIKE w.value ESCAPE '!'
             AND NOT EXISTS (
               SELECT 1 FROM tree_pieces tp JOIN pieces p ON p.id = tp.piece_id JOIN sections s ON s.id = p.section_id JOIN works k ON k.id = s.work_id
                WHERE tp.tree_id = t.id AND (k.title || ', ' || s.name) LIKE w.value ESCAPE '!'))
      ORDER BY coalesce(t.scrapped_at, t.released_at) DESC, t.id DESC LIMIT :limit OFFSET :offset`,
    { type: QueryTypes.SELECT, replacements: { words: JSON.stringify(words.map(likePattern)), ...behind, limit, offset } },
  )
}

async function inOrder(found: readonly { id: string }[], clock: Clock): Promise<TreeListRow[]> {
  if (found.length === 0) return []
  const ids = found.map(({ id }) => id)
  const place = new Map(ids.map((id, index) => [id, index]))
  const rows = await rowsOf({ ids }, clock)
  return rows.toSorted((one, other) => (place.get(one.id) ?? 0) - (place.get(other.id) ?? 0))
}

function likePattern(word: string): string {
  return `%${word.replaceAll(/[!%_]/g, (sign) => `!${sign}`)}%`
}

async function rowsOf(trees: { on: 'floor' } | { ids: readonly string[] }, clock: Clock): Promise<TreeListRow[]> {
  const floor = await loadFloor({ now: clock.now(), trees })
  return floor.trees.map((tree) => ({ ...queueTree(tree, floor.context.places), recipeLabel: tree.facts.recipe.name }))
}
