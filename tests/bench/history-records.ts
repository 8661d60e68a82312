// Run in a process of its own by the bench: `history-records.ts <folder>`, with DATA_DIR in it. Makes two foundries with the same sixty
// drying coats: one of two weeks, one with a year of readings and ten thousand finished coats behind it.
import { copyFileSync, mkdirSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { databaseFile } from '@/db/connection'
import { migrate } from '@/db/migrator'
import { openPlainHandle } from '@/db/plain-handle'
import { recordReadings } from '@/lib/commands/record-readings'
import { database, Sensor } from '@/models'
import { dipOne, buildFormerTree } from '@/tests/factories/former-tree'
import { addFormerReadings, addFormerTrees } from '@/tests/factories/long-history'
import { buildFoundry, buildPlace, buildRecipe, buildTree, HOUR, MINUTE } from '@/tests/factories/shell-room'
import { seedMember } from '@/tests/setup/server'

const DAY = 24 * HOUR
const DRYING = 60
const SENSORS = 3
const FINISHED_COATS = 10_000
const COATS_OF_A_TREE = 4

const [folder = ''] = process.argv.slice(2)
mkdirSync(process.env['DATA_DIR'] ?? '', { recursive: true })
await migrate(databaseFile())
const now = Math.floor(Date.now() / MINUTE) * MINUTE
const foundry = await buildFoundry()
const member = await seedMember('owner')

const placeIds = [foundry.placeId]
for (let more = 1; more < SENSORS; more += 1) {
  const sensor = await Sensor.create({ name: `Sensor ${more + 1}`, kind: 'logger', createdAt: now - 15 * DAY })
  placeIds.push((await buildPlace({ sensorId: sensor.id, airSpeedMps: 0.5 + 0.5 * more })).id)
}
for (const { id } of await Sensor.findAll()) {
  const rows = []
  for (let at = now - 15 * DAY; at <= now; at += 5 * MINUTE) {
    const turn = Math.sin(((at % DAY) / DAY) * 2 * Math.PI)
    rows.push({ measuredAt: at, airTempC: 21 + 2 * turn - id * 0.3, relHumidityPct: 54 - 6 * turn + id })
  }
  await recordReadings({ sensorId: id, source: 'sensor', enteredBy: null, rows }, { clock: { now: () => now } })
}

const recipeVersionId = await buildRecipe(foundry)
for (let index = 0; index < DRYING; index += 1) {
  const placeId = placeIds[index % SENSORS]!
  const { id: treeId } = await buildTree(foundry, { recipeVersionId, placeId, since: now - 9 * DAY })
  await dipOne(foundry, member, { treeId, coatNumber: 1, placeId, at: now - 30 * HOUR })
  await dipOne(foundry, member, { treeId, coatNumber: 2, placeId, at: now - (1 + index) * 4 * MINUTE })
}

const copyTo = (name: string): string => {
  const dataDir = join(folder, name)
  mkdirSync(dataDir)
  copyFileSync(databaseFile(), join(dataDir, 'kilnward.sqlite'))
  writeFileSync(join(dataDir, 'secrets.json'), '{}')
  return join(dataDir, 'kilnward.sqlite')
}
await database.query('PRAGMA wal_checkpoint(TRUNCATE)')
copyTo('two weeks')

const treeId = await buildFormerTree(foundry, member, now)
await database.query('PRAGMA wal_checkpoint(TRUNCATE)')
const handle = await openPlainHandle(copyTo('a year'))
await handle.exec('PRAGMA journal_mode = WAL; PRAGMA synchronous = OFF')
await addFormerTrees(handle, { treeId, count: FINISHED_COATS / COATS_OF_A_TREE - 1, days: 360 })
await addFormerReadings(handle, { dayStartsAt: Math.floor(now / DAY) * DAY - 8 * DAY, days: 365 - 8 })
await handle.exec('PRAGMA wal_checkpoint(TRUNCATE)')
const counts = await handle.all(
  'SELECT (SELECT count(*) FROM readings) AS readings, (SELECT count(*) FROM coats WHERE covered_at IS NOT NULL) AS finished',
)
await handle.close()
await database.close()
process.stdout.write(`${JSON.stringify(counts)}\n`)
