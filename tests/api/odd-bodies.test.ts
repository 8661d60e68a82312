import { randomUUID } from 'node:crypto'
import fc from 'fast-check'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { DESCRIBED_DOORS } from '@/lib/server/doors/all'
import { DOORS } from '@/tests/api/authorisation-table'
import { newClient, signIn, type Client } from '@/tests/setup/client'
import { oddBodies, oddParts } from '@/tests/setup/odd-bodies'
import { seedMember, startServer, type TestServer } from '@/tests/setup/server'

const BODIES = 5000
const SEED = 20_261_013
const LANES = 6
/** One token may send so often in a minute; past it a body is not even looked at. */
const ROWS_PER_TOKEN = 55

let server: TestServer
let owner: Client
let ids: Record<string, string>
let tokens: string[]
/** A valid body of each door, about things that are there. */
let valid: Record<string, unknown>

beforeAll(async () => {
  server = await startServer()
  const factories = await import('@/tests/factories/shell-room')
  const { issueSensorToken } = await import('@/lib/commands/issue-sensor-token')
  const foundry = await factories.buildFoundry()
  const member = await seedMember('owner')
  owner = await signIn(server.baseUrl, member.email, member.password)
  const tree = await factories.buildTree(foundry)
  const fanPlace = await factories.buildPlace({ sensorId: foundry.sensorId, airSpeedFansOffMps: 0.1 })
  ids = { treeId: tree.id, placeId: fanPlace.id, bathId: foundry.faceBathId, sensorId: String(foundry.sensorId) }
  const clock = { now: () => Date.now() }
  tokens = []
  for (let count = 0; count < Math.ceil(BODIES / bodied.length / ROWS_PER_TOKEN) + 1; count += 1) {
    tokens.push((await issueSensorToken({ sensorId: foundry.sensorId }, { member, clock })).token)
  }
  const operationId = randomUUID()
  valid = {
    ...Object.fromEntries(bodied.map((door) => [door.operationId, door.body?.example])),
    sendReadings: { readings: [{ measuredAt: Date.now(), airTempC: 21, relHumidityPct: 50 }] },
    logDips: {
      operationId,
      bathId: foundry.faceBathId,
      stucco: 'fine',
      way: 'dip',
      drainSeconds: 60,
      dippedAt: Date.now() - 60_000,
      roughTime: 10,
      room: { airTempC: 21, relHumidityPct: 50 },
      trees: [{ treeId: tree.id, coatNumber: 1, placeId: foundry.placeId, reason: 'Because' }],
    },
    moveTree: { operationId, placeId: foundry.placeId },
  }
})
afterAll(() => server.stop())

const bodied = DESCRIBED_DOORS.filter(({ body }) => body)

/** What no answer may hold: a stack, a path of the program, the words of the database. */
const INSIDES = /\n\s+at [\w.<>]+ \(|node_modules|\.(?:ts|js|mjs):\d+|SQLITE_|[Ss]equelize|ZodError|at Object\./

async function misfit(response: Response): Promise<string | null> {
  const text = await response.text()
  if (response.status >= 500) return `status ${response.status}: ${text.slice(0, 300)}`
  if (INSIDES.test(text)) return `shows its insides: ${text.slice(0, 300)}`
  const isProblem = response.headers.get('content-type') === 'application/problem+json'
  // The framework itself answers an address that cannot be decoded.
  return response.status >= 400 && !isProblem && response.status !== 400 && response.status !== 404
    ? `${response.status} is no problem document`
    : null
}

async function inLanes<Item>(items: readonly Item[], work: (item: Item, index: number) => Promise<void>): Promise<void> {
  const waiting = items.map((item, index) => ({ item, index }))
  const lane = async () => {
    for (let next = waiting.pop(); next; next = waiting.pop()) await work(next.item, next.index)
  }
  await Promise.all(Array.from({ length: LANES }, lane))
}

describe('the server', () => {
  it(`takes ${BODIES} odd bodies over all doors: no 5xx, no stack, no promise left alone`, async () => {
    const wrong: string[] = []
    const statuses = new Map<number, number>()
    const began = performance.now()
    for (const door of bodied) {
      const bodies = fc.sample(oddBodies(valid[door.operationId]), { seed: SEED, numRuns: Math.ceil(BODIES / bodied.length) })
      const names = [...door.path.matchAll(/\{(\w+)\}/g)].map(([, name = '']) => name)
      const parts = fc.sample(fc.tuple(...names.map((name) => oddParts(ids[name] ?? 'x'))), { seed: SEED, numRuns: bodies.length })
      await inLanes(bodies, async (body, index) => {
        const path = names.reduce((text, name, place) => text.replace(`{${name}}`, parts[index]?.[place] ?? ''), door.path)
        const isSensor = door.who === 'sensor'
        const token = tokens[Math.floor(index / ROWS_PER_TOKEN)] ?? ''
        const client = isSensor ? newClient(server.baseUrl) : owner
        const headers = { 'content-type': 'application/json', ...(isSensor ? { authorization: `Bearer ${token}` } : {}) }
        const response = await client.fetch(path, { method: door.method, headers, body })
        statuses.set(response.status, (statuses.get(response.status) ?? 0) + 1)
        const found = await misfit(response)
        if (found) wrong.push(`${door.method} ${path.slice(0, 120)} ${found}\n  ${body.slice(0, 300)}`)
      })
    }
    const seconds = Math.round((performance.now() - began) / 1000)
    expect(wrong.slice(0, 5), `${wrong.length} of ${BODIES} in ${seconds} s`).toEqual([])
    // Enough of them got past the first check, and enough did not.
    expect((statuses.get(200) ?? 0) + (statuses.get(201) ?? 0)).toBeGreaterThan(20)
    expect(statuses.get(422)).toBeGreaterThan(1000)
    expect(statuses.get(400)).toBeGreaterThan(200)
    expect(server.output()).not.toMatch(/unhandledRejection|uncaughtException|request\.failed|RangeError/i)
  }, 280_000)

  it('takes odd words in every address that is read', async () => {
    const reads = DOORS.filter(({ method }) => method === 'GET' || method === 'PAGE')
    const words = fc.oneof(
      fc.constantFrom('1', '-1', '1e9', '%00', "'--", 'x'.repeat(2000), '%F0%9F%90%9F', '[]'),
      fc.string({ maxLength: 20 }),
    )
    const names = [
      'q',
      'state',
      'tree',
      'member',
      'kind',
      'from',
      'to',
      'before',
      'page',
      'sort',
      'order',
      'callbackUrl',
      'error',
      '__proto__',
    ]
    const queries = fc.sample(fc.array(fc.tuple(fc.constantFrom(...names), words), { maxLength: 4 }), { seed: SEED, numRuns: 6 })
    const asked = reads.flatMap(({ route, example }) => {
      const parts = fc.sample(oddParts('KW-1'), { seed: SEED, numRuns: queries.length })
      return queries.map((query, index) => {
        const path = index === 0 && example ? example : route.replaceAll(/\[[^\]]+\]/g, parts[index] ?? 'x')
        return `${path}?${new URLSearchParams(query.map(([name, word]) => [name, word.toWellFormed()]))}`
      })
    })
    const wrong: string[] = []
    await inLanes(asked, async (path) => {
      const response = await owner.fetch(path)
      const text = await response.text()
      if (response.status >= 500 || INSIDES.test(text)) wrong.push(`${path.slice(0, 200)}: ${response.status}`)
    })
    expect(wrong).toEqual([])
  }, 120_000)

  it('shows nothing where the framework itself gives up: an address that cannot be decoded', async () => {
    // It answers before any code of ours; 400 would be right.
    const response = await owner.fetch('/api/v1/trees/%E0%A4%A/holds')
    expect([400, 404, 500]).toContain(response.status)
    expect((await response.text()).length).toBeLessThan(100)
  })

  it('is well afterwards: the records are whole and it answers', async () => {
    const { database } = await import('@/models')
    expect((await owner.fetch('/api/v1/queue')).status).toBe(200)
    expect((await newClient(server.baseUrl).fetch('/api/health')).status).toBe(200)
    const [check] = await database.query('PRAGMA integrity_check')
    expect(check).toEqual([{ integrity_check: 'ok' }])
    expect(({} as Record<string, unknown>)['role']).toBeUndefined()
  })
})
