import { createHash } from 'node:crypto'
import { mkdtempSync, rmSync } from 'node:fs'
import { readdir, readFile } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, describe, expect, it } from 'vitest'
import { QueryTypes } from 'sequelize'
import { openDatabase } from '@/db/connection'
import { migrate, migrationsOf } from '@/db/migrator'
import { openPlainHandle, type PlainHandle } from '@/db/plain-handle'
import { examineDatabase } from '@/db/snapshot'

const directory = mkdtempSync(join(tmpdir(), 'kilnward-migrator-'))
afterAll(() => rmSync(directory, { recursive: true, force: true }))

const shipped = (await readdir('db/migrations')).filter((name) => name.endsWith('.sql')).toSorted()

describe('migrate', () => {
  it('applies every migration to a fresh file, and nothing the second time', async () => {
    const file = join(directory, 'fresh.sqlite')
    expect(await migrate(file)).toEqual(shipped)
    expect(await migrate(file)).toEqual([])
    const database = openDatabase(file)
    expect(await database.query('SELECT name FROM migrations', { type: QueryTypes.SELECT })).toEqual(shipped.map((name) => ({ name })))
    expect(await database.query('PRAGMA journal_mode', { type: QueryTypes.SELECT })).toEqual([{ journal_mode: 'wal' }])
    await database.close()
  })

  it('refuses a file of a newer program and names what it does not know', async () => {
    const file = join(directory, 'newer.sqlite')
    await migrate(file)
    const database = openDatabase(file)
    await database.query("INSERT INTO migrations (name) VALUES ('9999-kiln-on-the-moon.sql')")
    await database.close()
    await expect(migrate(file)).rejects.toThrow('9999-kiln-on-the-moon.sql')
  })
})

/** Schemas that foundries may have: each was the newest of a released version. */
const RELEASED = ['0001-shell-room.sql', '0002-bounded-reads.sql']

const rowsOf = async (handle: PlainHandle, sql: string) => (await handle.all(sql)) as Record<string, unknown>[]
const tablesOf = async (handle: PlainHandle) =>
  (await rowsOf(handle, "SELECT name FROM sqlite_schema WHERE type = 'table' AND name NOT LIKE 'sqlite_%' ORDER BY name")).map((row) =>
    String(row['name']),
  )

/** The whole schema as one sum: tables, indexes and triggers, word for word. */
async function schemaHash(file: string): Promise<string> {
  const handle = await openPlainHandle(file)
  const schema = await handle.all('SELECT type, name, tbl_name, sql FROM sqlite_schema ORDER BY type, name')
  await handle.close()
  return createHash('sha256').update(JSON.stringify(schema)).digest('hex')
}

/** Rows and a sum over the named columns of each table. */
async function contentOf(file: string, columnsOf: Record<string, string[]>): Promise<Record<string, { rows: number; sum: string }>> {
  const handle = await openPlainHandle(file)
  const content: Record<string, { rows: number; sum: string }> = {}
  for (const [table, columns] of Object.entries(columnsOf)) {
    const list = columns.map((column) => `"${column}"`).join(', ')
    const rows = await handle.all(`SELECT ${list} FROM "${table}" ORDER BY ${list}`)
    content[table] = { rows: rows.length, sum: createHash('sha256').update(JSON.stringify(rows)).digest('hex') }
  }
  await handle.close()
  return content
}

/** The looks of old, read back from the evidence that they became. */
async function looksAsEvidence(file: string): Promise<{ rows: number; sum: string }> {
  const handle = await openPlainHandle(file)
  const rows = await handle.all(
    `SELECT id, coat_id, CASE verdict WHEN 'dry' THEN 'looks dry' ELSE verdict END AS verdict, taken_at AS looked_at, member_id, moisture_ratio,
            forecast_p10_at, forecast_p50_at, forecast_p90_at
       FROM evidence WHERE kind = 'touch' AND spot = 'outside' ORDER BY 1, 2, 3, 4, 5, 6, 7, 8, 9`,
  )
  await handle.close()
  return { rows: rows.length, sum: createHash('sha256').update(JSON.stringify(rows)).digest('hex') }
}

/** A file as a released version left it, with 5,000 rows and more over all of its tables. */
async function recordsAt(level: string): Promise<string> {
  const file = join(directory, `${level}.sqlite`)
  const handle = await openPlainHandle(file)
  await handle.exec('CREATE TABLE migrations (name TEXT PRIMARY KEY) STRICT; PRAGMA foreign_keys = ON')
  for (const name of shipped.slice(0, shipped.indexOf(level) + 1)) {
    await handle.exec(await readFile(join('db/migrations', name), 'utf8'))
    await handle.all('INSERT INTO migrations VALUES (?)', [name])
  }
  await handle.exec(`BEGIN; ${await readFile('tests/fixtures/records-at-0001.sql', 'utf8')} COMMIT`)
  await handle.close()
  return file
}

describe.each(RELEASED)('up from %s, with rows in place', (level) => {
  it('keeps every row as it was, and ends in the schema of a fresh file', async () => {
    const file = await recordsAt(level)
    const handle = await openPlainHandle(file)
    const tables = await tablesOf(handle)
    const columnsOf: Record<string, string[]> = {}
    for (const table of tables.filter((name) => name !== 'migrations')) {
      columnsOf[table] = (await rowsOf(handle, `PRAGMA table_info("${table}")`)).map((column) => String(column['name']))
    }
    await handle.close()
    const before = await contentOf(file, columnsOf)
    expect(Object.entries(before).filter(([, { rows }]) => rows === 0)).toEqual([])
    expect(Object.values(before).reduce((sum, { rows }) => sum + rows, 0)).toBeGreaterThan(5000)

    expect(await migrationsOf(file)).toEqual({
      applied: shipped.slice(0, shipped.indexOf(level) + 1),
      pending: shipped.slice(shipped.indexOf(level) + 1),
    })
    expect(await migrate(file)).toEqual(shipped.slice(shipped.indexOf(level) + 1))

    // Looks have become evidence; everything else stands where it stood.
    const { coat_looks: looks, ...rest } = before
    const { coat_looks: _columns, ...restColumns } = columnsOf
    expect(await contentOf(file, restColumns)).toEqual(rest)
    expect(await looksAsEvidence(file)).toEqual(looks)
    expect(await examineDatabase(file)).toMatchObject({ faults: [], brokenReferences: 0, migrations: shipped })
    const fresh = join(directory, `fresh-for-${level}.sqlite`)
    await migrate(fresh)
    expect(await schemaHash(file)).toBe(await schemaHash(fresh))
  })
})
