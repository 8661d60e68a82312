import { QueryTypes } from 'sequelize'
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

/** Every work with its sections and how much of it hangs in the room, by title. */
export async function loadWorkList(): Promise<WorkListRow[]> {
  const rows = await database.query<Omit<WorkListRow, 'sections' | 'isDemo'> & { sections: string; isDemo: number }>(
    `SELECT w.id, w.title, w.edition_size AS editionSize, w.is_demo AND NOT (SELECT is_demo FROM foundry) AS isDemo,
            (SELECT json_group_array(name) FROM (SELECT name FROM sections WHERE work_id = w.id ORDER BY name)) AS sections,
            count(p.id) AS castCount, count(t.id) AS openCount, min(t.pour_date) AS nextPour
       FROM works w LEFT JOIN sections s ON s.work_id = w.id LEFT JOIN pieces p ON p.section_id = s.id
       LEFT JOIN tree_pieces tp ON tp.piece_id = p.id
       LEFT JOIN trees t ON t.id = tp.tree_id AND t.released_at IS NULL AND t.scrapped_at IS NULL
      GROUP BY w.id ORDER BY w.title COLLATE NOCASE`,
    { type: QueryTypes.SELECT },
  )
  return rows.map(({ sections, isDemo, ...row }) => ({ ...row, isDemo: isDemo === 1, sections: stringsOf(sections) }))
}

function stringsOf(json: string): string[] {
  const parsed: unknown = JSON.parse(json)
  return Array.isArray(parsed) ? parsed.map(String) : []
}
