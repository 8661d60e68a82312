import type { PlainHandle } from '@/db/plain-handle'

const MINUTE = 60_000
const HOUR = 60 * MINUTE
const DAY = 24 * HOUR

/** Not copied with a tree: pieces hang on one tree only, notices and watches end with it. */
const NOT_COPIED = new Set(['tree_pieces', 'tree_watches', 'notices'])

/** Columns that hold an instant; the others that end so hold no time. */
const isInstant = (name: string) => name === 'at' || name === 'since' || name.endsWith('_at')

const columnsOf = async (handle: PlainHandle, table: string) =>
  (await handle.all(`PRAGMA table_info(${table})`)) as { name: string; type: string; pk: number }[]

const foreignKeysOf = async (handle: PlainHandle, table: string) =>
  (await handle.all(`PRAGMA foreign_key_list(${table})`)) as { table: string; from: string }[]

/** Tables of which every row is about one tree, with the column that names it or its coat: new ones are found by themselves. */
async function tablesOfTrees(handle: PlainHandle): Promise<{ table: string; ofTree: string }[]> {
  const tables = (await handle.all("SELECT name FROM sqlite_master WHERE type = 'table' AND name NOT LIKE 'sqlite_%'")) as {
    name: string
  }[]
  const found: { table: string; ofTree: string }[] = []
  for (const { name } of tables) {
    if (NOT_COPIED.has(name)) continue
    const keys = await foreignKeysOf(handle, name)
    const ofTree = keys.find((key) => key.table === 'trees')
    const ofCoat = keys.find((key) => key.table === 'coats')
    if (ofTree) found.push({ table: name, ofTree: `o.${ofTree.from} = :tree` })
    else if (ofCoat) found.push({ table: name, ofTree: `o.${ofCoat.from} IN (SELECT id FROM coats WHERE tree_id = :tree)` })
  }
  return found
}

/**
 * Copies one tree that has left, with everything that is about it, `count` times back over `days`: trees of former months, straight
 * into the records. Copies keep who, where and what, and get ids and tags of their own.
 */
export async function addFormerTrees(handle: PlainHandle, { treeId, count, days }: { treeId: string; count: number; days: number }) {
  const tables = [{ table: 'trees', ofTree: 'o.id = :tree' }, ...(await tablesOfTrees(handle))]
  const named = new Set(['trees', ...tables.map(({ table }) => table)])
  await handle.exec('BEGIN; PRAGMA defer_foreign_keys = ON')
  for (const { table, ofTree } of tables) {
    const keys = new Set((await foreignKeysOf(handle, table)).flatMap((key) => (named.has(key.table) ? [key.from] : [])))
    const columns = (await columnsOf(handle, table)).filter(({ pk, type }) => !(pk === 1 && type === 'INTEGER'))
    const values = columns.map(({ name, type, pk }) => {
      if (name === 'tag') return `'H-' || (10000 + n.i)`
      if (keys.has(name) || (pk > 0 && name === 'id' && type === 'TEXT')) return `printf('%08x', n.i) || substr(o.${name}, 9)`
      return isInstant(name) && type === 'INTEGER' ? `o.${name} - n.i * ${Math.floor((days * DAY) / count)}` : `o.${name}`
    })
    await handle.exec(
      `WITH RECURSIVE n(i) AS (SELECT 1 UNION ALL SELECT i + 1 FROM n WHERE i < ${count})
       INSERT INTO ${table} (${columns.map(({ name }) => name).join(', ')})
       SELECT ${values.join(', ')} FROM n, ${table} o WHERE ${ofTree.replace(':tree', `'${treeId}'`)}`,
    )
  }
  await handle.exec('COMMIT')
}

/**
 * Copies one day of readings and their hours back over `days`, of every sensor that has them. The day has to be a whole one, well
 * inside what the product itself worked out.
 */
export async function addFormerReadings(handle: PlainHandle, { dayStartsAt, days }: { dayStartsAt: number; days: number }) {
  await handle.exec('BEGIN')
  for (const [table, time] of [
    ['readings', 'measured_at'],
    ['dose_hours', 'hour_start'],
  ] as const) {
    const columns = (await columnsOf(handle, table)).map(({ name }) => name)
    const shifted = columns.map((name) => (name === time || name === 'received_at' ? `t.${name} - d.i * ${DAY}` : `t.${name}`))
    await handle.exec(
      `WITH RECURSIVE first(day) AS (SELECT min(${time}) FROM ${table}),
                      d(i) AS (SELECT (SELECT (${dayStartsAt} - day) / ${DAY} + 2 FROM first) UNION ALL SELECT i + 1 FROM d WHERE i < ${days})
       INSERT INTO ${table} (${columns.join(', ')}) SELECT ${shifted.join(', ')} FROM d, ${table} t
        WHERE t.${time} >= ${dayStartsAt} AND t.${time} < ${dayStartsAt + DAY} ORDER BY t.sensor_id, d.i DESC, t.${time}`,
    )
  }
  await handle.exec('COMMIT')
}
