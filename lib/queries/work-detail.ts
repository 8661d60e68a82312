import { QueryTypes } from 'sequelize'
import type { Clock } from '@/lib/core/clock'
import { loadFloor } from '@/lib/queries/floor'
import { queueTree } from '@/lib/queue/assemble'
import type { QueueTree } from '@/lib/queue/contract'
import type { Cast } from '@/lib/works/edition-table'
import { database, Foundry, Work } from '@/models'

/** A casting with the whole tree that carries it. */
export type WorkCast = Omit<Cast, 'tree'> & { recastOf: string | null; tree: QueueTree | null }

export type WorkDetail = {
  id: string
  title: string
  editionSize: number | null
  /** Of the demo, in a foundry that is not the demo itself. */
  isDemo: boolean
  /** By name, panel 2 before panel 10. */
  sections: { id: string; name: string }[]
  /** Oldest first. */
  casts: WorkCast[]
}

type Row = { pieceId: string; sectionId: string; editionNumber: number; createdAt: number; recastOf: string | null; treeId: string | null }

/** A work with its sections, every piece of it, and the trees that carry them as they stand now; null when there is no such work. */
export async function loadWorkDetail({ workId, clock }: { workId: string; clock: Clock }): Promise<WorkDetail | null> {
  const work = await Work.findByPk(workId)
  if (!work) return null
  const replacements = { workId }
  const [sections, rows, foundry] = await Promise.all([
    database.query<{ id: string; name: string }>('SELECT id, name FROM sections WHERE work_id = :workId', {
      type: QueryTypes.SELECT,
      replacements,
    }),
    database.query<Row>(
      `SELECT p.id AS pieceId, p.section_id AS sectionId, p.edition_number AS editionNumber, p.created_at AS createdAt,
              p.recast_of AS recastOf, tp.tree_id AS treeId
         FROM pieces p JOIN sections s ON s.id = p.section_id LEFT JOIN tree_pieces tp ON tp.piece_id = p.id
        WHERE s.work_id = :workId ORDER BY p.created_at, p.id`,
      { type: QueryTypes.SELECT, replacements },
    ),
    Foundry.findByPk(1),
  ])
  const treeIds = [...new Set(rows.flatMap(({ treeId }) => treeId ?? []))]
  const floor = await loadFloor({ now: clock.now(), trees: { ids: treeIds } })
  const trees = new Map(floor.trees.map((tree) => [tree.facts.id, queueTree(tree, floor.context.places)]))
  return {
    id: work.id,
    title: work.title,
    editionSize: work.editionSize,
    isDemo: work.isDemo && foundry?.isDemo !== true,
    sections: sections.toSorted((one, other) => one.name.localeCompare(other.name, 'en', { numeric: true })),
    casts: rows.map(({ treeId, ...row }) => ({
      ...row,
      isRecast: row.recastOf !== null,
      tree: treeId === null ? null : (trees.get(treeId) ?? null),
    })),
  }
}
