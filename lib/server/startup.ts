import { createECDH } from 'node:crypto'
import { QueryTypes } from 'sequelize'
import { database, databaseFile, inTransaction } from '@/db/connection'
import { shippedMigrations } from '@/db/migrator'
import { env } from '@/lib/core/env'
import { log } from '@/lib/core/log'

/**
 * Checks settings and records before the first request and opens the handle that stays open for the life of the process.
 *
 * @throws {Error} with one line that says what to mend.
 */
async function prepareProcess(): Promise<void> {
  const { VAPID_PUBLIC_KEY: publicKey, VAPID_PRIVATE_KEY: privateKey } = env()
  if (publicKeyOf(privateKey) !== publicKey) throw new Error('VAPID_PUBLIC_KEY does not belong to VAPID_PRIVATE_KEY.')
  await requireWritableRecords()
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

/** Asks for the lock of a writer, which a file that cannot be written does not give. */
async function requireWritableRecords(): Promise<void> {
  try {
    await database.query('PRAGMA journal_mode = WAL')
    await inTransaction(() => Promise.resolve())
  } catch (error) {
    throw new Error(`The records in ${databaseFile()} cannot be written (${error instanceof Error ? error.message : String(error)}).`, {
      cause: error,
    })
  }
}

function publicKeyOf(privateKey: string): string | null {
  try {
    const pair = createECDH('prime256v1')
    pair.setPrivateKey(Buffer.from(privateKey, 'base64url'))
    return pair.getPublicKey('base64url')
  } catch {
    return null
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

const END_WITHIN_MS = 4000

/**
 * Ends the web server within seconds of being told to. The framework waits until every connection is idle, and a tablet that polls
 * keeps its own busy for ever. What was answered by then is in the records, so nothing is lost.
 */
export function endInTime(): void {
  for (const signal of ['SIGTERM', 'SIGINT'] as const) {
    process.once(signal, () => setTimeout(() => process.exit(0), END_WITHIN_MS).unref())
  }
}
