import { log } from '@/lib/core/log'
import { PULSE_MAX_AGE_MS, workerPulse } from '@/lib/queries/worker-pulse'
import { openRoute } from '@/lib/server/api'

/** Says whether the records answer and the worker lives, and nothing more: it is open to everybody. */
export const GET = openRoute(async ({ clock }) => {
  try {
    const pulseAt = await workerPulse()
    const isAlive = pulseAt !== null && clock.now() - pulseAt < PULSE_MAX_AGE_MS
    return Response.json({ status: isAlive ? 'ok' : 'degraded' })
  } catch (error) {
    log('health.failed', { error: String(error) })
    return Response.json({ status: 'degraded' }, { status: 503 })
  }
})
