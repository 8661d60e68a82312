import sqlite3 from 'sqlite3'

/** A driver handle without models: for work on a whole file, and for settings that belong to one handle. */
export type PlainHandle = {
  exec: (sql: string) => Promise<void>
  all: (sql: string, values?: unknown[]) => Promise<unknown[]>
  close: () => Promise<void>
}

/**
 * Opens a database file past the models.
 *
 * @param options.isReadOnly refuses writes, and a file that is not there; otherwise it is made.
 * @throws {Error} the driver's own.
 */
export function openPlainHandle(file: string, { isReadOnly = false }: { isReadOnly?: boolean } = {}): Promise<PlainHandle> {
  const mode = isReadOnly ? sqlite3.OPEN_READONLY : sqlite3.OPEN_READWRITE | sqlite3.OPEN_CREATE
  return new Promise((resolve, reject) => {
    const db = new sqlite3.Database(file, mode, (opened) => {
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
