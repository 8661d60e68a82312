import { log } from '@/lib/core/log'
import { bringUpToDate, closeRecords } from '@/lib/server/records'

// Run by the start script, which waits for one message.
try {
  const records = await bringUpToDate()
  await closeRecords()
  process.send?.(records)
} catch (error) {
  log('start.refused', { reason: error instanceof Error ? error.message : String(error) })
  process.exitCode = 1
}
process.disconnect?.()
