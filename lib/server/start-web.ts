import { log } from '@/lib/core/log'

/** Checks the web server's settings and records, and ends it with one line in the log when it could not serve. */
export async function startWeb(): Promise<void> {
  try {
    const { endInTime, prepareProcessOrExit } = await import('@/lib/server/startup')
    await prepareProcessOrExit()
    endInTime()
  } catch (error) {
    // Loading it opens the folder of the records. The framework would go on and answer each request with an error.
    log('start.refused', { reason: `The records cannot be written (${error instanceof Error ? error.message : String(error)}).` })
    process.exit(1)
  }
}
