// Run in a process of its own by the bench, on the records of DATA_DIR: `worker-passes.ts <count>`. Prints the median of so many passes of
// the worker over a floor that has just changed, in milliseconds.
import { allJobs } from '@/jobs/registry'
import { database } from '@/models'
import { median } from '@/tests/bench/load'

const clock = { now: () => Date.now() }
const jobs = allJobs({
  clock,
  vapidPublicKey: process.env['VAPID_PUBLIC_KEY'] ?? '',
  monotonic: () => performance.now(),
  random: Math.random,
}).filter(({ name }) => ['watch-floor', 'send-pushes'].includes(name))

const pass = async () => {
  await database.query('UPDATE foundry SET created_at = created_at + 1')
  globalThis.kilnwardQueueCache = undefined
  const began = performance.now()
  for (const job of jobs) await job.run({ clock, isStopping: () => false })
  return performance.now() - began
}

const times: number[] = []
// The first ones open notices and warm up.
for (let round = -3; round < Number(process.argv[2]); round += 1) {
  const took = await pass()
  if (round >= 0) times.push(took)
}
await database.close()
process.stdout.write(`median ${median(times)}\n`)
