import { systemClock, type Clock } from '@/lib/core/clock'
import { closeRecords } from '@/lib/server/records'

type Seed = { seedDemo: (options: { clock: Clock }) => Promise<unknown> }

// Run by the start script on a database without a foundry. Named at run time, since the demo foundry may be left out.
const name: string = '@/lib/demo/seed'
// oxlint-disable-next-line typescript/no-unsafe-type-assertion -- the module's one door
const { seedDemo } = (await import(name)) as Seed
await seedDemo({ clock: systemClock })
await closeRecords()
process.send?.({ isSeeded: true })
process.disconnect?.()
