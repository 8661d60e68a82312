import { readdir, readFile } from 'node:fs/promises'
import { join } from 'node:path'
import { Umzug, type UmzugStorage } from 'umzug'
import { z } from 'zod'
import { openPlainHandle, type PlainHandle } from '@/db/plain-handle'

const appliedTable: UmzugStorage<PlainHandle> = {
  executed: async ({ context }) => {
    await context.exec('CREATE TABLE IF NOT EXISTS migrations (name TEXT PRIMARY KEY) STRICT')
    const rows = z.array(z.object({ name: z.string() })).parse(await context.all('SELECT name FROM migrations ORDER BY name'))
    return rows.map((row) => row.name)
  },
  // Written by the migration itself, inside its transaction.
  logMigration: async () => {},
  unlogMigration: async () => {},
}

const newUmzug = (handle: PlainHandle) =>
  new Umzug<PlainHandle>({
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

async function withHandle<Result>(
  file: string,
  work: (handle: PlainHandle, umzug: Umzug<PlainHandle>) => Promise<Result>,
): Promise<Result> {
  // Foreign keys can only be switched outside a transaction and on the same handle.
  const handle = await openPlainHandle(file)
  try {
    // WAL is stored in the file, so it is set once here for web and worker alike.
    await handle.exec('PRAGMA journal_mode = WAL; PRAGMA foreign_keys = OFF')
    return await work(handle, newUmzug(handle))
  } finally {
    await handle.close()
  }
}

const MIGRATIONS_DIR = join(process.cwd(), 'db/migrations')

/** Names of the migrations that this version of the program knows, in order. */
export async function shippedMigrations(): Promise<string[]> {
  return (await readdir(MIGRATIONS_DIR)).filter((name) => name.endsWith('.sql')).toSorted()
}

/** Names of migrations that a file has had, and of those that it still needs. A file that is not there is made, empty. */
export function migrationsOf(file: string): Promise<{ applied: string[]; pending: string[] }> {
  return withHandle(file, async (handle, umzug) => ({
    applied: await appliedTable.executed({ context: handle }),
    pending: (await umzug.pending()).map(({ name }) => name),
  }))
}

/**
 * Brings the database file up to date with db/migrations/*.sql, each in one transaction with a foreign-key check before the commit.
 *
 * @returns names of the migrations that were applied now.
 * @throws {Error} when the file was written by a newer version of the program, or a migration breaks a reference.
 */
export function migrate(file: string): Promise<string[]> {
  return withHandle(file, async (handle, umzug) => {
    const known = new Set([...(await umzug.executed()), ...(await umzug.pending())].map((migration) => migration.name))
    const applied = await appliedTable.executed({ context: handle })
    const newer = applied.filter((name) => !known.has(name))
    if (newer.length > 0) throw new Error(`This database was written by a newer Kilnward (${newer.join(', ')}). Start that version.`)
    return (await umzug.up()).map((migration) => migration.name)
  })
}
