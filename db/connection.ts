import { AsyncLocalStorage } from 'node:async_hooks'
import { mkdirSync } from 'node:fs'
import { dirname, join } from 'node:path'
import { Mutex } from 'async-mutex'
import { Sequelize, Transaction } from 'sequelize'
import sqlite3 from 'sqlite3'

const BUSY_TIMEOUT_MS = 5000

/**
 * Sequelize 6 fires no connect hook for SQLite and opens a new handle for every transaction,
 * so settings that belong to a handle live in the driver class.
 */
class PatientDatabase extends sqlite3.Database {
  constructor(file: string, mode: number, done: (error: Error | null) => void) {
    super(file, mode, (error) => {
      if (error) return done(error)
      this.configure('busyTimeout', BUSY_TIMEOUT_MS)
      // FULL: a logged coat is worth an fsync.
      this.exec(
        'PRAGMA synchronous = FULL; PRAGMA foreign_keys = ON; PRAGMA trusted_schema = OFF; PRAGMA journal_size_limit = 67108864',
        done,
      )
    })
  }
}

declare global {
  var kilnwardDatabase: Sequelize | undefined
  var kilnwardWriteMutex: Mutex | undefined
  var kilnwardStorage: AsyncLocalStorage<Map<string, unknown>> | undefined
}

// Queries inside a transaction find it here, so that one which forgets to name it cannot wait for itself.
// On globalThis like the handle: a second copy of this module would not see that a transaction is open and wait for itself.
const storage = (globalThis.kilnwardStorage ??= new AsyncLocalStorage<Map<string, unknown>>())
Sequelize.useCLS({
  get: (key: string) => storage.getStore()?.get(key),
  set: (key: string, value: unknown) => storage.getStore()?.set(key, value),
  run: (callback: (context: unknown) => unknown) => storage.run(new Map(storage.getStore()), () => callback(undefined)),
  bind: (callback: unknown) => callback,
})

export function openDatabase(file: string): Sequelize {
  mkdirSync(dirname(file), { recursive: true })
  return new Sequelize({
    dialect: 'sqlite',
    dialectModule: { ...sqlite3, Database: PatientDatabase },
    storage: file,
    logging: false,
    // Read-then-write commands must hold the write lock from the start: DEFERRED loses the race and fails at once.
    transactionType: Transaction.TYPES.IMMEDIATE,
    // The busy timeout alone decides how long to wait.
    retry: { max: 1 },
  })
}

export const databaseFile = (): string => join(process.env['DATA_DIR'] ?? 'data', 'kilnward.sqlite')

/** One per process: `next dev` reloads modules, and the handle outside transactions stays open for the life of the process. */
export const database = (globalThis.kilnwardDatabase ??= openDatabase(databaseFile()))

const writeMutex = (globalThis.kilnwardWriteMutex ??= new Mutex())

/**
 * Runs `work` in one IMMEDIATE transaction, one at a time in this process. Everything it awaits joins the transaction.
 * Without the mutex, a dozen waiting writers hold every thread that the holder's COMMIT needs.
 */
export function inTransaction<Result>(work: () => Promise<Result>): Promise<Result> {
  if (storage.getStore()?.get('transaction')) return work()
  return writeMutex.runExclusive(() => database.transaction(work))
}
