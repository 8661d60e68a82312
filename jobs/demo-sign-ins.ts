import { log } from '@/lib/core/log'
import { loadDemoSignIns } from '@/lib/queries/demo-sign-ins'
import { closeRecords } from '@/lib/server/records'

// Run by the start script, which waits for one message; by hand it logs the sign-ins.
try {
  const signIns = await loadDemoSignIns()
  await closeRecords()
  if (process.send) process.send({ signIns })
  else log('demo.sign-ins', { signIns })
} catch (error) {
  log('demo.no-sign-ins', { reason: error instanceof Error ? error.message : String(error) })
  process.exitCode = 1
}
process.disconnect?.()
