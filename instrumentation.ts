import { log } from '@/lib/core/log'

/** Runs once before the server answers: it would start and fail each request without a secret otherwise. */
export async function register(): Promise<void> {
  if (process.env.NEXT_RUNTIME !== 'nodejs') return
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
