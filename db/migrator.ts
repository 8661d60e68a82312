import { readFile } from 'node:fs/promises'
import { join } from 'node:path'
import sqlite3 from 'sqlite3'
import { Umzug, type UmzugStorage } from 'umzug'
import { z } from 'zod'

type Handle = {
  exec: (sql: string) => Promise<void>
  all: (sql: string, values?: unknown[]) => Promise<unknown[]>
  close: () => Promise<void>
}

/** A plain driver handle: foreign keys can only be switched outside a transaction and on the same handle. */
function openHandle(file: string): Promise<Handle> {
  return new Promise((resolve, reject) => {
    const db = new sqlite3.Database(file, (opened) => {
      if (opened) return reject(opened)
      db.configure('busyTimeout', 10_000)
      resolve({
        exec: (sql) => new Promise((ok, no) => db.exec(sql, (error) => (error ? no(error) : ok()))),
        all: (sql, values = []) => new Promise((ok, no) => db.all(sql, values, (error, rows) => (error ? no(error) : ok(rows)))),
        close: () => new Promise((ok, no) => db.close((error) => (error ? no(error) : ok()))),
      })
    })
  })
}

const appliedTable: UmzugStorage<Handle> = {
  executed: async ({ context }) => {
    await context.exec('CREATE TABLE IF NOT EXISTS migrations (name TEXT PRIMARY KEY) STRICT')
    const rows = z.array(z.object({ name: z.string() })).parse(await context.all('SELECT name FROM migrations ORDER BY name'))
    return rows.map((row) => row.name)
  },
  // Written by the migration itself, inside its transaction.
  logMigration: async () => {},
  unlogMigration: async () => {},
}

/**
 * Brings the database file up to date with db/migrations/*.sql, each in one transaction with a foreign-key check before the commit.
 *
 * @returns names of the migrations that were applied now.
 * @throws {Error} when the file was written by a newer version of the program, or a migration breaks a reference.
 */
export async function migrate(file: string): Promise<string[]> {
  const handle = await openHandle(file)
  try {
    // WAL is stored in the file, so it is set once here for web and worker alike.
    await handle.exec('PRAGMA journal_mode = WAL; PRAGMA foreign_keys = OFF')
    const umzug = new Umzug<Handle>({
      context: handle,
      storage: appliedTable,
      logger: undefined,
      migrations: {
        glob: ['migrations/*.sql', { cwd: join(process.cwd(), 'db') }],
        resolve: ({ name, path, context }) => ({
          name,
          up: async () => {
            const sql = await readFile(path!, 'utf8')
            await context.exec('BEGIN IMMEDIATE')
            try {
              await context.exec(sql)
              const broken = await context.all('PRAGMA foreign_key_check')
              if (broken.length > 0) throw new Error(`Migration ${name} leaves ${broken.length} broken references.`)
              await context.all('INSERT INTO migrations (name) VALUES (?)', [name])
              await context.exec('COMMIT')
            } catch (error) {
              await context.exec('ROLLBACK')
              throw error
            }
          },
        }),
      },
    })
    const known = new Set([...(await umzug.executed()), ...(await umzug.pending())].map((migration) => migration.name))
    const applied = await appliedTable.executed({ context: handle })
    const newer = applied.filter((name) => !known.has(name))
    if (newer.length > 0) throw new Error(`This database was written by a newer Kilnward (${newer.join(', ')}). Start that version.`)
    return (await umzug.up()).map((migration) => migration.name)
  } finally {
    await handle.close()
  }
}
