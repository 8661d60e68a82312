import { z } from 'zod'
import { openPlainHandle } from '@/db/plain-handle'

/**
 * A consistent copy of a live database, while others write. A plain copy of the file would lose what is still in its -wal.
 *
 * @param to must not exist. A copy that fails may leave it behind, empty: the caller takes it away.
 * @throws {Error} the driver's own, such as SQLITE_FULL.
 */
export async function takeSnapshot(from: string, to: string): Promise<void> {
  const handle = await openPlainHandle(from, { isReadOnly: true })
  try {
    await handle.all('VACUUM INTO ?', [to])
  } finally {
    await handle.close()
  }
}

/** What a database file holds, and whether it is whole. */
export type Examination = {
  /** What SQLite's own check complains about; empty in a sound file. */
  faults: string[]
  /** Rows whose reference leads nowhere. */
  brokenReferences: number
  migrations: string[]
  /** Rows of each table. */
  counts: Record<string, number>
  /** Zone of the foundry in it; null where none is set up. */
  timeZone: string | null
  /** When something last happened to a tree; null where nothing has. */
  newestEventAt: number | null
}

const FAULTS_NAMED = 5
const textRows = z.array(z.record(z.string(), z.unknown()))

/**
 * Opens a database file and reads all of it once.
 *
 * @throws {Error} when it is not a database at all.
 */
export async function examineDatabase(file: string): Promise<Examination> {
  const handle = await openPlainHandle(file, { isReadOnly: true })
  const select = async (sql: string) => textRows.parse(await handle.all(sql))
  try {
    const verdict = (await select(`PRAGMA integrity_check(${FAULTS_NAMED})`)).map((row) => String(row['integrity_check']))
    const tables = (await select("SELECT name FROM sqlite_schema WHERE type = 'table' AND name NOT LIKE 'sqlite_%' ORDER BY name")).map(
      (row) => String(row['name']),
    )
    const counts: Record<string, number> = {}
    for (const table of tables) {
      const [row] = await select(`SELECT count(*) AS n FROM "${table}"`)
      counts[table] = Number(row?.['n'])
    }
    const has = (table: string) => tables.includes(table)
    const [foundry] = has('foundry') ? await select('SELECT time_zone FROM foundry') : []
    const [event] = has('tree_events') ? await select('SELECT max(at) AS at FROM tree_events') : []
    return {
      faults: verdict.join() === 'ok' ? [] : verdict,
      brokenReferences: (await handle.all('PRAGMA foreign_key_check')).length,
      migrations: has('migrations') ? (await select('SELECT name FROM migrations ORDER BY name')).map((row) => String(row['name'])) : [],
      counts,
      timeZone: foundry ? String(foundry['time_zone']) : null,
      newestEventAt: typeof event?.['at'] === 'number' ? event['at'] : null,
    }
  } finally {
    await handle.close()
  }
}
