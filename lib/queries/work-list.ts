import { QueryTypes } from 'sequelize'
import { cutPage } from '@/lib/trees/tree-view'
import { filterWorks } from '@/lib/works/filter-works'
import { database } from '@/models'

export type WorkListRow = {
  id: string
  title: string
  editionSize: number | null
  /** Of the demo, in a foundry that is not the demo itself. */
  isDemo: boolean
  sections: string[]
  /** Pieces that were ever cast, and those on trees that are still open. */
  castCount: number
  openCount: number
  /** 'YYYY-MM-DD', the earliest of its open trees. */
  nextPour: string | null
}

export type WorkListPage = {
  /** All works there are, found or not. */
  total: number
  rows: WorkListRow[]
  page: number
  pages: number
}

type NamedWork = Pick<WorkListRow, 'id' | 'title' | 'editionSize' | 'isDemo' | 'sections'>
type Counts = Pick<WorkListRow, 'castCount' | 'openCount' | 'nextPour'>

/**
 * A page of the works whose title or sections carry every word typed, by title, with how much of each hangs in the room. Pieces are
 * counted for the works of the page alone.
 *
 * @param page from 1; one beyond the last gives the last.
 */
export async function loadWorkList({ query, page, size }: { query: string; page: number; size: number }): Promise<WorkListPage> {
  const named = await database.query<Omit<NamedWork, 'sections' | 'isDemo'> & { sections: string; isDemo: number }>(
    `SELECT id, title, edition_size AS editionSize, is_demo AND NOT (SELECT is_demo FROM foundry) AS isDemo,
            (SELECT json_group_array(name) FROM (SELECT name FROM sections WHERE work_id = w.id ORDER BY name)) AS sections
       FROM works w ORDER BY title COLLATE NOCASE, id`,
    { type: QueryTypes.SELECT },
  )
  const works: NamedWork[] = named.map(({ sections, isDemo, ...work }) => ({
    ...work,
    isDemo: isDemo === 1,
    sections: stringsOf(sections),
  }))
  const shown = cutPage(filterWorks(works, query), page, size)
  const counts = await countsOf(shown.rows.map(({ id }) => id))
  return { ...shown, total: works.length, rows: shown.rows.map((work) => ({ ...work, ...(counts.get(work.id) ?? NONE) })) }
}

const NONE: Counts = { castCount: 0, openCount: 0, nextPour: null }

async function countsOf(workIds: readonly string[]): Promise<Map<string, Counts>> {
  const rows = await database.query<Counts & { workId: string }>(
    `SELECT s.work_id AS workId, count(p.id) AS castCount, count(t.id) AS openCount, min(t.pour_date) AS nextPour
       FROM sections s JOIN pieces p ON p.section_id = s.id LEFT JOIN tree_pieces tp ON tp.piece_id = p.id
       LEFT JOIN trees t ON t.id = tp.tree_id AND t.released_at IS NULL AND t.scrapped_at IS NULL
      WHERE s.work_id IN (SELECT value FROM json_each(:workIds)) GROUP BY s.work_id`,
    { type: QueryTypes.SELECT, replacements: { workIds: JSON.stringify(workIds) } },
  )
  return new Map(rows.map(({ workId, ...counts }) => [workId, counts]))
}

function stringsOf(json: string): string[] {
  const parsed: unknown = JSON.parse(json)
  return Array.isArray(parsed) ? parsed.map(String) : []
}
