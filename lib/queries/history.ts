import { Op, QueryTypes } from 'sequelize'
import { historySpan, NOBODY, type HistoryCursor, type HistoryFilter, type HistorySource } from '@/lib/history/history-filter'
import { subjectHref, type HistoryLine } from '@/lib/history/history-line'
import { database, Member, Tree } from '@/models'

export const HISTORY_PAGE_LINES = 50

export type HistoryPage = {
  /** Newest first. */
  lines: HistoryLine[]
  /** Where the next, older page begins; null on the last one. */
  older: string | null
  members: { id: string; name: string }[]
  kinds: string[]
  /** False where the filter names a tree that there has never been. */
  isTreeKnown: boolean
  /** Names of what the ids in the lines stand for. */
  names: Map<string, string>
}

type Row = {
  id: number
  source: HistorySource
  at: number
  kind: string
  memberId: string | null
  device: string
  detail: string
  subjectType: string
  subjectId: string
  subjectName: string
}

const select = <Found extends object>(sql: string, replacements: Record<string, unknown> = {}) =>
  database.query<Found>(sql, { type: QueryTypes.SELECT, replacements })

/**
 * A page of what has happened, trees and foundry in one list, newest first. Each table gives at most one page from where the last
 * one ended, along an index, so an old page costs what a new one does.
 */
export async function loadHistory(
  filter: HistoryFilter,
  { cursor, timeZone }: { cursor: HistoryCursor | null; timeZone: string },
): Promise<HistoryPage> {
  const [tree, members, kinds] = await Promise.all([
    filter.tag === null ? null : Tree.findOne({ where: { tag: filter.tag }, attributes: ['id'] }),
    Member.findAll({ attributes: ['id', 'name'], order: [['name', 'ASC']] }),
    allKinds(),
  ])
  const isTreeKnown = filter.tag === null || tree !== null
  const asked = { filter, span: historySpan(filter, timeZone), cursor, treeId: tree?.id ?? null }
  const rows = isTreeKnown ? await newestRows(asked) : []
  const shown = rows.slice(0, HISTORY_PAGE_LINES)
  const last = shown.at(-1)
  const nameOf = new Map(members.map(({ id, name }) => [id, name]))
  const tagOf = await tagsOf(shown)
  return {
    lines: shown.map((row) => lineOf(row, nameOf, tagOf)),
    older: rows.length > shown.length && last ? keyOf(last) : null,
    members: members.map(({ id, name }) => ({ id, name })),
    kinds,
    isTreeKnown,
    names: await namesIn(shown),
  }
}

type Asked = {
  filter: HistoryFilter
  span: { from: number | null; before: number | null }
  cursor: HistoryCursor | null
  treeId: string | null
}

async function newestRows(asked: Asked): Promise<Row[]> {
  const sources: HistorySource[] = asked.treeId === null ? ['foundry', 'tree'] : ['tree']
  const found = await Promise.all(sources.map((source) => rowsOf(source, asked)))
  return found.flat().toSorted((one, other) => other.at - one.at || rank(other.source) - rank(one.source) || other.id - one.id)
}

const rank = (source: HistorySource) => (source === 'tree' ? 1 : 0)

const COLUMNS: Record<HistorySource, string> = {
  foundry: "'foundry' AS source, subject_type AS subjectType, subject_id AS subjectId, subject_name AS subjectName",
  tree: "'tree' AS source, 'tree' AS subjectType, tree_id AS subjectId, '' AS subjectName",
}

/** Lines of one table after the cursor. Its order is an index's own: what is equal first, then `at`, then the row's number. */
function rowsOf(source: HistorySource, { filter, span, cursor, treeId }: Asked): Promise<Row[]> {
  // Within a tree's few lines the other columns only sort out: a plus keeps the planner from walking along them.
  const along = treeId === null ? '' : '+'
  const conditions = [
    treeId !== null && 'tree_id = :treeId',
    filter.memberId !== null && `${along}member_id ${filter.memberId === NOBODY ? 'IS NULL' : '= :memberId'}`,
    filter.kind !== null && `${along}kind = :kind`,
    'at >= :from',
    span.before !== null && 'at < :before',
    cursor !== null && afterCursor(source, cursor),
  ]
  return select<Row>(
    `SELECT id, at, kind, member_id AS memberId, device, detail, ${COLUMNS[source]}
       FROM ${source}_events WHERE ${conditions.filter(Boolean).join(' AND ')} ORDER BY at DESC, id DESC LIMIT :limit`,
    {
      treeId,
      memberId: filter.memberId,
      kind: filter.kind,
      from: span.from ?? 0,
      before: span.before,
      cursorAt: cursor?.at,
      cursorId: cursor?.id,
      limit: HISTORY_PAGE_LINES + 1,
    },
  )
}

function afterCursor(source: HistorySource, cursor: HistoryCursor): string {
  if (source === cursor.source) return '(at, id) < (:cursorAt, :cursorId)'
  return rank(source) < rank(cursor.source) ? 'at <= :cursorAt' : 'at < :cursorAt'
}

const keyOf = ({ at, source, id }: Row) => `${at}.${source}.${id}`

/** Every kind there is. */
async function allKinds(): Promise<string[]> {
  const found = await Promise.all([kindsIn('tree_events'), kindsIn('foundry_events')])
  return [...new Set(found.flat().map(({ kind }) => kind))].toSorted((one, other) => one.localeCompare(other, 'en'))
}

/** One step along the index for each, however many lines it has. */
const kindsIn = (table: string) =>
  select<{ kind: string }>(
    `WITH RECURSIVE each_kind (kind) AS (
       SELECT min(kind) FROM ${table}
       UNION ALL SELECT (SELECT min(kind) FROM ${table} WHERE kind > each_kind.kind) FROM each_kind WHERE each_kind.kind IS NOT NULL
     ) SELECT kind FROM each_kind WHERE kind IS NOT NULL`,
  )

async function tagsOf(rows: readonly Row[]): Promise<Map<string, string>> {
  const ids = [...new Set(rows.filter(({ source }) => source === 'tree').map(({ subjectId }) => subjectId))]
  const trees = await Tree.findAll({ where: { id: { [Op.in]: ids } }, attributes: ['id', 'tag'] })
  return new Map(trees.map(({ id, tag }) => [id, tag]))
}

const UUID = /[0-9a-f]{8}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{12}/g

async function namesIn(rows: readonly Row[]): Promise<Map<string, string>> {
  const ids = [...new Set(rows.flatMap(({ detail }) => detail.match(UUID) ?? []))]
  if (ids.length === 0) return new Map()
  const found = await select<{ id: string; name: string }>(
    `SELECT v.id, r.name || ', version ' || v.version AS name FROM recipe_versions v JOIN recipes r ON r.id = v.recipe_id WHERE v.id IN (:ids)
     UNION ALL SELECT id, name FROM recipes WHERE id IN (:ids)
     UNION ALL SELECT id, name FROM places WHERE id IN (:ids)
     UNION ALL SELECT id, name FROM baths WHERE id IN (:ids)
     UNION ALL SELECT id, name FROM members WHERE id IN (:ids)
     UNION ALL SELECT id, title AS name FROM works WHERE id IN (:ids)`,
    { ids },
  )
  return new Map(found.map(({ id, name }) => [id, name]))
}

function lineOf(row: Row, nameOf: ReadonlyMap<string, string>, tagOf: ReadonlyMap<string, string>): HistoryLine {
  const detail: unknown = JSON.parse(row.detail)
  const part = (name: string): unknown => (isGroup(detail) ? detail[name] : undefined)
  const [text, before, after] = [part('text'), part('before'), part('after')]
  const tag = tagOf.get(row.subjectId)
  return {
    key: keyOf(row),
    at: row.at,
    kind: row.kind,
    text: typeof text === 'string' && text !== '' ? text : row.kind,
    by: row.memberId === null ? null : (nameOf.get(row.memberId) ?? 'somebody who is gone'),
    device: row.device,
    subject:
      row.source === 'tree'
        ? { type: 'tree', name: tag ?? '', href: tag === undefined ? null : `/trees/${encodeURIComponent(tag)}` }
        : { type: row.subjectType, name: row.subjectName, href: subjectHref(row.subjectType, row.subjectId) },
    before: isGroup(before) ? before : {},
    after: isGroup(after) ? after : {},
  }
}

const isGroup = (value: unknown): value is Record<string, unknown> => value !== null && typeof value === 'object' && !Array.isArray(value)
