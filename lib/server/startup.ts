import { QueryTypes } from 'sequelize'
import { database } from '@/db/connection'
import { shippedMigrations } from '@/db/migrator'
import { env } from '@/lib/core/env'
import { log } from '@/lib/core/log'

/**
 * Checks settings and records before the first request and opens the handle that stays open for the life of the process.
 *
 * @throws {Error} with one line that says what to mend.
 */
export async function prepareProcess(): Promise<void> {
  env()
  await database.query('PRAGMA journal_mode = WAL')
  const applied = await database
    .query<{ name: string }>('SELECT name FROM migrations ORDER BY name', { type: QueryTypes.SELECT })
    .catch((error: Error) => {
      throw new Error(`The records cannot be read (${error.message}). Start Kilnward with npm start.`)
    })
  const names = applied.map(({ name }) => name)
  if (names.join() !== (await shippedMigrations()).join()) {
    throw new Error('The records were written by another version of Kilnward. Start it with npm start, which brings them up to date.')
  }
}

/** The same, but ends the process with one line in the log when something is wrong. */
export async function prepareProcessOrExit(): Promise<void> {
  try {
    await prepareProcess()
  } catch (error) {
    log('start.refused', { reason: error instanceof Error ? error.message : String(error) })
    process.exit(1)
  }
}
