import { performance } from 'node:perf_hooks'
import { setTimeout as sleep } from 'node:timers/promises'
import { importUploads } from '@/jobs/import-uploads'
import { allJobs } from '@/jobs/registry'
import { listenMqtt } from '@/jobs/listen-mqtt'
import { runPass } from '@/jobs/run-pass'
import { startSchedule } from '@/jobs/schedule'
import { systemClock } from '@/lib/core/clock'
import { env } from '@/lib/core/env'
import { log } from '@/lib/core/log'
import { closeRecords } from '@/lib/server/records'
import { prepareProcessOrExit } from '@/lib/server/startup'

/** Less than the start script waits before it ends this process. */
const STOP_WITHIN_MS = 4500

await prepareProcessOrExit()

let isStopping = false
const stopping = new AbortController()
const context = { clock: systemClock, isStopping: () => isStopping }
const jobs = allJobs({
  clock: systemClock,
  vapidPublicKey: env().VAPID_PUBLIC_KEY,
  monotonic: () => performance.now(),
  random: Math.random,
})
const stopSchedule = startSchedule(jobs, context)
const stopListening = listenMqtt({ clock: systemClock })
log('worker.started', { jobs: jobs.map(({ name }) => name) })

// At once, and not at the next full minute: the floor may have waited for a while. The tick claimed here is not run again.
const firstPass = runPass(jobs[0]!, context)
const imports = importUploads({
  ...context,
  monotonic: () => performance.now(),
  sleep: (milliseconds) => sleep(milliseconds, undefined, { signal: stopping.signal }).catch(() => {}),
})

async function stop(reason: string): Promise<void> {
  if (isStopping) return
  isStopping = true
  stopping.abort()
  log('worker.stopping', { reason })
  // A send that hangs is left to its lease; the next worker takes it up.
  const patience = setTimeout(() => process.exit(0), STOP_WITHIN_MS)
  await Promise.all([stopSchedule(), stopListening(), firstPass, imports])
  await closeRecords()
  clearTimeout(patience)
  log('worker.stopped')
  process.exit(0)
}

process.on('SIGTERM', () => void stop('SIGTERM'))
process.on('SIGINT', () => void stop('SIGINT'))
// The start script is gone: nobody would ever end this process.
process.on('disconnect', () => void stop('parent gone'))
