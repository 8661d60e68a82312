import { systemClock } from '@/lib/core/clock'
import { reasonOf } from '@/lib/core/errors'
import { log } from '@/lib/core/log'
import { seedDemo } from '@/lib/demo/seed'
import { keepDemoTokens } from '@/lib/demo/token-file'
import { closeRecords } from '@/lib/server/records'

// Run by the start script, which waits for one message; by hand it logs the sign-ins.
try {
  const { signIns, sensorTokens } = await seedDemo({ clock: systemClock })
  await keepDemoTokens(sensorTokens)
  await closeRecords()
  if (process.send) process.send({ signIns })
  else log('demo.made', { signIns })
} catch (error) {
  log('demo.not-made', { reason: reasonOf(error) })
  process.exitCode = 1
}
process.disconnect?.()
