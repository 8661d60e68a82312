import { beforeAll, describe, expect, it } from 'vitest'
import { databaseFile } from '@/db/connection'
import { openPlainHandle } from '@/db/plain-handle'
import { allJobs } from '@/jobs/registry'
import type { Actor } from '@/lib/members/actor'
import { loadQueue } from '@/lib/queries/queue'
import { loadRoomPage } from '@/lib/queries/room'
import { loadRoomWhatIf } from '@/lib/queries/room-what-if'
import { loadTreeDetail } from '@/lib/queries/tree-detail'
import { database } from '@/models'
import { buildFormerTree, dipOne } from '@/tests/factories/former-tree'
import { addFormerReadings, addFormerTrees } from '@/tests/factories/long-history'
import { buildAir, buildFoundry, buildMember, buildTree, HOUR, MINUTE, NOW, type TestFoundry } from '@/tests/factories/shell-room'

const DAY = 24 * HOUR

/** May be read whole: they grow with the shop and with what hangs on its floor, not with its years. */
const READ_WHOLE = new Set([
  'foundry',
  'members',
  'sensors',
  'sensor_tokens',
  'places',
  'fan_hours',
  'former_airs',
  'shift_hours',
  'closures',
  'baths',
  'recipes',
  'recipe_versions',
  'recipe_coats',
  'push_subscriptions',
])
/** Partial indexes that hold what is on the floor, or open, and nothing that has ended. */
const SMALL_INDEXES = new Set(['trees_on_floor', 'holds_open', 'notices_open', 'deliveries_due'])

const clock = { now: () => NOW }
let foundry: TestFoundry
let member: Actor
let tag: string
let formerTreeId: string

beforeAll(async () => {
  foundry = await buildFoundry()
  member = await buildMember('supervisor')
  await buildAir(foundry.sensorId, NOW - 15 * DAY, NOW)
  formerTreeId = await buildFormerTree(foundry, member, NOW)
  for (let index = 0; index < 6; index += 1) {
    const tree = await buildTree(foundry, { since: NOW - 9 * DAY })
    tag = tree.tag
    if (index > 0) await dipOne(foundry, member, { treeId: tree.id, coatNumber: 1, at: NOW - 2 * DAY - index * MINUTE })
    if (index > 2) await dipOne(foundry, member, { treeId: tree.id, coatNumber: 2, at: NOW - index * HOUR })
  }
}, 180_000)

/** What a tablet, a page or the worker asks for again and again. */
const WORK: Record<string, () => Promise<unknown>> = {
  'the queue': () => {
    globalThis.kilnwardQueueCache = undefined
    return loadQueue({ clock })
  },
  'the room page': () => loadRoomPage({ sensorId: foundry.sensorId, range: '48h', tempUnit: 'degC', clock }),
  'the room page over a fortnight': () => loadRoomPage({ sensorId: foundry.sensorId, range: '14d', tempUnit: 'degC', clock }),
  'what another air would do': () => loadRoomWhatIf(foundry.sensorId, { until: 'opening', relHumidityPct: 45 }, { clock }),
  'the page of a tree': () => loadTreeDetail({ tag, viewer: member, clock }),
  "the worker's pass": async () => {
    globalThis.kilnwardQueueCache = undefined
    const jobs = allJobs({ clock, vapidPublicKey: process.env['VAPID_PUBLIC_KEY'] ?? '', monotonic: () => 0, random: () => 0 })
    for (const job of jobs) {
      if (['watch-floor', 'send-pushes', 'correct-readings'].includes(job.name)) await job.run({ clock, isStopping: () => false })
    }
  },
}

/** The SQL that some work sends, its values in place. */
async function statementsOf(work: () => Promise<unknown>): Promise<string[]> {
  const statements = new Set<string>()
  const log = (line: unknown) => statements.add(String(line).replace(/^Executing \([^)]*\): /, ''))
  // Sequelize's types do not tell of it, but it is where each query looks.
  const options: unknown = Reflect.get(database, 'options')
  if (typeof options !== 'object' || options === null) throw new Error('Sequelize keeps its options elsewhere now.')
  Reflect.set(options, 'logging', log)
  try {
    await work()
  } finally {
    Reflect.set(options, 'logging', false)
  }
  return [...statements].filter((sql) => /^\s*(select|with|update|delete|insert)/i.test(sql))
}

/** Of each name in a statement the table behind it. */
function namesIn(sql: string): Map<string, string> {
  const names = new Map<string, string>()
  for (const [, table = '', alias] of sql.matchAll(/\b(?:from|join|update|into)\s+[`"]?(\w+)[`"]?(?:\s+(?:as\s+)?[`"]?(\w+)[`"]?)?/gi)) {
    names.set(table, table)
    if (alias && !/^(where|on|set|cross|join|left|inner|order|group|limit)$/i.test(alias)) names.set(alias, table)
  }
  return names
}

/** The steps of a statement that grow with the years: whole tables, and all that one sensor has ever measured. */
async function growingSteps(sql: string, tables: ReadonlySet<string>): Promise<string[]> {
  const handle = await openPlainHandle(databaseFile(), { isReadOnly: true })
  const plan = (await handle.all(`EXPLAIN QUERY PLAN ${sql.replaceAll(/\$\d+/g, '?')}`)) as { detail: string }[]
  await handle.close()
  const names = namesIn(sql)
  // The first or the last of a sensor is one step into the index.
  const isFirstOrLast = /^\s*select (?:min|max)\((?:measured_at|hour_start)\)(?: as \w+)? from \w+ where sensor_id = \d+$/i.test(sql)
  return plan
    .map(({ detail }) => detail)
    .filter((detail) => {
      const [, way, name = '', index] = /^(SCAN|SEARCH) (\w+)(?:.* INDEX (\w+))?/.exec(detail) ?? []
      const table = names.get(name) ?? name
      if (!way || !tables.has(table) || READ_WHOLE.has(table)) return false
      if (way === 'SCAN') return !SMALL_INDEXES.has(index ?? '')
      return ['readings', 'dose_hours'].includes(table) && !isFirstOrLast && !/measured_at|hour_start/.test(detail)
    })
}

/** The same statement with other values is the same shape. */
const shapeOf = (sql: string) => sql.replaceAll(/'(?:[^']|'')*'|\b\d+(?:\.\d+)?\b/g, '?').replaceAll(/\s+/g, ' ')

async function rowsByShape(): Promise<Map<string, number>> {
  const handle = await openPlainHandle(databaseFile(), { isReadOnly: true })
  const rows = new Map<string, number>()
  for (const work of Object.values(WORK)) {
    for (const sql of await statementsOf(work)) {
      if (!/^\s*(select|with)/i.test(sql) || /\$\d/.test(sql)) continue
      const shape = shapeOf(sql)
      rows.set(shape, Math.max(rows.get(shape) ?? 0, (await handle.all(sql)).length))
    }
  }
  await handle.close()
  return rows
}

describe('what is asked for again and again', () => {
  it.each(Object.keys(WORK))('does not read with the years: %s', async (name) => {
    const tables = new Set(
      (await database.query("SELECT name FROM sqlite_master WHERE type = 'table'", { type: 'SELECT' })).map(
        (row) => (row as { name: string }).name,
      ),
    )
    const statements = await statementsOf(WORK[name]!)
    expect(statements.length).toBeGreaterThan(5)
    const growing = []
    for (const sql of statements) {
      const steps = await growingSteps(sql, tables)
      if (steps.length > 0) growing.push({ steps, sql })
    }
    expect(growing).toEqual([])
  })

  it('finds a statement that does', async () => {
    const tables = new Set(['readings', 'coats', 'trees', 'tree_events', 'sensors'])
    expect(await growingSteps('SELECT * FROM coats c WHERE c.reason IS NULL', tables)).toHaveLength(1)
    expect(await growingSteps('SELECT count(*) FROM `tree_events` AS `TreeEvent`', tables)).toHaveLength(1)
    expect(await growingSteps('SELECT max(air_temp_c) FROM readings r WHERE r.sensor_id = 1', tables)).toHaveLength(1)
    expect(await growingSteps('SELECT * FROM sensors', tables)).toEqual([])
    expect(await growingSteps('SELECT * FROM readings WHERE sensor_id = 1 AND measured_at > 5', tables)).toEqual([])
  })

  it('brings no more rows when years lie behind the same floor', async () => {
    // Once before, since the first pass of the worker writes.
    for (const work of Object.values(WORK)) await work()
    const before = await rowsByShape()
    const handle = await openPlainHandle(databaseFile())
    await addFormerTrees(handle, { treeId: formerTreeId, count: 200, days: 700 })
    await addFormerReadings(handle, { dayStartsAt: Math.floor(NOW / DAY) * DAY - 5 * DAY, days: 90 })
    await handle.close()
    const after = await rowsByShape()
    const [coats] = await database.query('SELECT count(*) AS count FROM coats', { type: 'SELECT' })
    expect(coats).toMatchObject({ count: 4 * 201 + 8 })
    const grown = [...after].filter(([shape, rows]) => rows > (before.get(shape) ?? 0))
    expect(grown).toEqual([])
  }, 120_000)
})
