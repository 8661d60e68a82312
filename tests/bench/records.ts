import { copyFileSync, mkdirSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { openPlainHandle } from '@/db/plain-handle'
import { addFormerReadings } from '@/tests/factories/long-history'
import type { TestFoundry } from '@/tests/factories/shell-room'
import type { SeededMember } from '@/tests/setup/server'

const MINUTE = 60_000
const HOUR = 60 * MINUTE
const DAY = 24 * HOUR
const FORTNIGHT = 15 * DAY
const TEN_YEARS_DAYS = 3652

export type Bench = { trees: number; history: 'two weeks' | 'a year' | 'ten years'; dataDir: string }

/**
 * Data folders of one foundry with 30 and 300 trees on the floor, each with two weeks and with ten years of five-minute
 * readings of two loggers. The air repeats from day to day, so the older days are copies of one whose hours the product worked
 * out itself. DATA_DIR of this process names `folder` before the first import of the models.
 */
export async function makeRecords(folder: string): Promise<{ cases: Bench[]; member: SeededMember }> {
  const live = join(folder, 'live')
  mkdirSync(live, { recursive: true })
  process.env['DATA_DIR'] = live
  const { migrate } = await import('@/db/migrator')
  await migrate(join(live, 'kilnward.sqlite'))
  const { seedMember } = await import('@/tests/setup/server')
  const { buildFoundry, buildPlace, buildRecipe } = await import('@/tests/factories/shell-room')
  const { recordReadings } = await import('@/lib/commands/record-readings')
  const { database, Sensor } = await import('@/models')
  const now = Math.floor(Date.now() / MINUTE) * MINUTE

  const foundry = await buildFoundry()
  const member = await seedMember('owner')
  const second = await Sensor.create({ name: 'Net loft', kind: 'logger', createdAt: now - FORTNIGHT })
  const place = await buildPlace({ sensorId: second.id })
  for (const sensorId of [foundry.sensorId, second.id]) {
    const rows = []
    for (let at = now - FORTNIGHT; at <= now; at += 5 * MINUTE) rows.push({ measuredAt: at, ...airAt(at, sensorId) })
    await recordReadings({ sensorId, source: 'sensor', enteredBy: null, rows }, { clock: { now: () => now } })
  }
  const recipeVersionId = await buildRecipe(foundry)
  const shop = { foundry, recipeVersionId, placeIds: [foundry.placeId, place.id], member, now }

  const cases: Bench[] = []
  let standing = 0
  for (const trees of [30, 300]) {
    await hangTrees(shop, trees - standing)
    standing = trees
    await database.query('PRAGMA wal_checkpoint(TRUNCATE)')
    for (const history of ['two weeks', 'ten years'] as const) {
      const dataDir = join(folder, `${trees} trees, ${history}`)
      mkdirSync(dataDir)
      copyFileSync(join(live, 'kilnward.sqlite'), join(dataDir, 'kilnward.sqlite'))
      writeFileSync(join(dataDir, 'secrets.json'), '{}')
      if (history === 'ten years') await addYears(join(dataDir, 'kilnward.sqlite'), now)
      cases.push({ trees, history, dataDir })
    }
  }
  await database.close()
  return { cases, member }
}

/** 18 to 24 °C and 45 to 59 % over the day, a little otherwise in the second room. */
function airAt(at: number, sensorId: number): { airTempC: number; relHumidityPct: number } {
  const turn = Math.sin(((at % DAY) / DAY) * 2 * Math.PI)
  return { airTempC: 21 + 3 * turn - sensorId * 0.3, relHumidityPct: 52 - 7 * turn + sensorId }
}

type Shop = {
  foundry: TestFoundry
  recipeVersionId: string
  placeIds: string[]
  member: SeededMember
  now: number
}

/** Trees with no, one or two coats on, dipped over the last thirty hours, so that every state of drying is there. */
async function hangTrees({ foundry, recipeVersionId, placeIds, member, now }: Shop, count: number): Promise<void> {
  const { buildTree, dipBody } = await import('@/tests/factories/shell-room')
  const { logDips } = await import('@/lib/commands/log-dips')
  const dip = async (treeId: string, placeId: string, coatNumber: number, dippedAt: number) => {
    const bathId = coatNumber === 1 ? foundry.faceBathId : foundry.backupBathId
    await logDips(dipBody(foundry, [{ treeId, coatNumber, placeId }], { bathId, stucco: coatNumber === 1 ? 'fine' : 'medium', dippedAt }), {
      member,
      clock: { now: () => now },
    })
  }
  for (let index = 0; index < count; index += 1) {
    const placeId = placeIds[index % placeIds.length]!
    const tree = await buildTree(foundry, { recipeVersionId, placeId, since: now - 10 * DAY })
    const coats = index % 3
    if (coats >= 1) await dip(tree.id, placeId, 1, now - 30 * HOUR + (index % 60) * 5 * MINUTE)
    if (coats >= 2) await dip(tree.id, placeId, 2, now - (index % 20) * 45 * MINUTE - 10 * MINUTE)
  }
}

async function addYears(file: string, now: number): Promise<void> {
  const handle = await openPlainHandle(file)
  await handle.exec('PRAGMA journal_mode = WAL; PRAGMA synchronous = OFF')
  // A whole day well inside what the product worked out.
  await addFormerReadings(handle, { dayStartsAt: (Math.floor(now / DAY) - 10) * DAY, days: TEN_YEARS_DAYS })
  await handle.exec('PRAGMA wal_checkpoint(TRUNCATE)')
  await handle.close()
}
