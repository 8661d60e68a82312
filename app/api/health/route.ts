import { log } from '@/lib/core/log'
import { workerPulse } from '@/lib/queries/worker-pulse'
import { openRoute } from '@/lib/server/api'

/** Says whether the records answer and the worker lives, and nothing more: it is open to everybody. */
export const GET = openRoute(async ({ clock }) => {
  try {
    const { isAlive } = await workerPulse(clock.now())
    return Response.json({ status: isAlive ? 'ok' : 'degraded' })
  } catch (error) {
    log('health.failed', { error: String(error) })
    return Response.json({ status: 'degraded' }, { status: 503 })
  }
})
