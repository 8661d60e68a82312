import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { queue as queueSchema } from '@/lib/queue/contract'
import type * as Factories from '@/tests/factories/shell-room'
import { newClient, signIn, type Client } from '@/tests/setup/client'
import { seedMember, startServer, type TestServer } from '@/tests/setup/server'

const MINUTE = 60_000

let server: TestServer
let maud: Client
let wren: Client
let factories: typeof Factories
let foundry: Factories.TestFoundry
let sensorToken: { id: string; token: string }

beforeAll(async () => {
  server = await startServer()
  factories = await import('@/tests/factories/shell-room')
  const { issueSensorToken } = await import('@/lib/commands/issue-sensor-token')
  foundry = await factories.buildFoundry()
  const first = await seedMember('operator', { name: 'Maud', email: 'maud@kilnward.example' })
  const second = await seedMember('operator', { name: 'Wren', email: 'wren@kilnward.example' })
  maud = await signIn(server.baseUrl, first.email, first.password)
  wren = await signIn(server.baseUrl, second.email, second.password)
  sensorToken = await issueSensorToken({ sensorId: foundry.sensorId }, { member: null, clock: { now: () => Date.now() } })
})
afterAll(() => server.stop())

const dip = (treeId: string, overrides: Record<string, unknown> = {}) => ({
  operationId: randomUUID(),
  bathId: foundry.faceBathId,
  stucco: 'fine',
  way: 'dip',
  drainSeconds: 60,
  dippedAt: Date.now() - MINUTE,
  trees: [{ treeId, coatNumber: 1, placeId: foundry.placeId }],
  ...overrides,
})

describe('POST /api/v1/dips', () => {
  it('two tablets log one coat, fifty times over: one coat and one 409 each time', async () => {
    const { Coat } = await import('@/models')
    const recipeVersionId = await factories.buildRecipe(foundry)
    const statuses = new Set<string>()
    for (let round = 0; round < 50; round += 1) {
      const { id } = await factories.buildTree(foundry, { recipeVersionId })
      const answers = await Promise.all([maud.send('POST', '/api/v1/dips', dip(id)), wren.send('POST', '/api/v1/dips', dip(id))])
      statuses.add(
        answers
          .map((answer) => answer.status)
          .toSorted((a, b) => a - b)
          .join('+'),
      )
      expect(await Coat.count({ where: { treeId: id } })).toBe(1)
    }
    expect(statuses).toEqual(new Set(['201+409']))
  })

  it('names the other person and the moment in the 409, as a problem document', async () => {
    const { id, tag } = await factories.buildTree(foundry)
    await wren.send('POST', '/api/v1/dips', dip(id))
    const answer = await maud.send('POST', '/api/v1/dips', dip(id))
    expect(answer.headers.get('content-type')).toContain('application/problem+json')
    expect(await answer.json()).toMatchObject({
      type: 'urn:kilnward:problem:conflict',
      status: 409,
      trees: [{ treeId: id, tag, reason: 'coat already on', by: 'Wren', coatNumber: 1 }],
    })
  })

  it('gives the same answer to the same operation, and says when it was taken back since', async () => {
    const { id } = await factories.buildTree(foundry)
    const body = dip(id)
    const first = await maud.send('POST', '/api/v1/dips', body)
    const again = await maud.send('POST', '/api/v1/dips', body)
    expect([first.status, again.status]).toEqual([201, 200])
    const logged = (await first.json()) as { coats: { coatId: string }[] }
    expect(await again.json()).toEqual(logged)
    const coatIds = logged.coats.map((coat) => coat.coatId)
    const undone = await maud.send('POST', '/api/v1/dips/undo', { operationId: randomUUID(), coatIds })
    expect(undone.status).toBe(200)
    expect(await (await maud.send('POST', '/api/v1/dips', body)).json()).toMatchObject({ coats: [{ withdrawn: true }] })
  })

  it.each([
    ['an unknown tree', { trees: [{ treeId: randomUUID(), coatNumber: 1, placeId: randomUUID() }] }, 404],
    ['a time ahead of the clock', { dippedAt: Date.now() + 30 * MINUTE }, 422],
    ['a drain that nobody waits for', { drainSeconds: 9000 }, 422],
    ['a field that does not belong', { role: 'owner' }, 422],
  ])('refuses %s', async (_what, overrides, status) => {
    const { id } = await factories.buildTree(foundry)
    expect((await maud.send('POST', '/api/v1/dips', dip(id, overrides))).status).toBe(status)
  })
})

describe('GET /api/v1/queue', () => {
  it('keeps to its contract and answers 304 until something changes', async () => {
    const first = await maud.fetch('/api/v1/queue')
    const etag = first.headers.get('etag') ?? ''
    queueSchema.parse(await first.json())
    const { id } = await factories.buildTree(foundry)
    const asked = { headers: { 'if-none-match': etag } }
    // The minute is part of the tag; a turn of it between the two calls is not what is tested here.
    const fresh = await maud.fetch('/api/v1/queue')
    const current = { headers: { 'if-none-match': fresh.headers.get('etag') ?? '' } }
    expect([200, 304]).toContain((await maud.fetch('/api/v1/queue', current)).status)
    expect((await maud.fetch('/api/v1/queue', asked)).status).toBe(200)
    await maud.send('POST', '/api/v1/dips', dip(id))
    expect((await wren.fetch('/api/v1/queue', current)).status).toBe(200)
  })
})

describe('small writes of the tablet', () => {
  it('hold, touch, move, stir and read once, however often they are sent', async () => {
    const { BathStir, Evidence, Hold, Reading, TreePlace } = await import('@/models')
    const { id } = await factories.buildTree(foundry)
    const elsewhere = await factories.buildPlace({ sensorId: foundry.sensorId })
    await maud.send('POST', '/api/v1/dips', dip(id))
    const twice = async (path: string, body: Record<string, unknown>) => {
      const whole = { operationId: randomUUID(), ...body }
      const answers = [await maud.send('POST', path, whole), await maud.send('POST', path, whole)]
      expect(answers.map((answer) => answer.status < 300)).toEqual([true, true])
    }
    await twice(`/api/v1/trees/${id}/evidence`, { coatNumber: 1, kind: 'touch', spot: 'outside', verdict: 'dry' })
    await twice(`/api/v1/trees/${id}/place`, { placeId: elsewhere.id })
    await twice(`/api/v1/trees/${id}/holds`, { reason: 'Crack at the cup' })
    await twice(`/api/v1/baths/${foundry.backupBathId}/stirs`, {})
    await twice('/api/v1/readings/typed', { sensorId: foundry.sensorId, airTempC: 20.5, relHumidityPct: 55 })
    expect(await Evidence.count()).toBe(1)
    expect(await TreePlace.count({ where: { treeId: id } })).toBe(2)
    expect(await Hold.count({ where: { treeId: id } })).toBe(1)
    expect(await BathStir.count()).toBe(1)
    expect(await Reading.count({ where: { source: 'typed' } })).toBe(1)
  })

  it('says in words what a reading cannot be, beside its field', async () => {
    const body = { operationId: randomUUID(), sensorId: foundry.sensorId, airTempC: 212, relHumidityPct: 55 }
    const answer = await maud.send('POST', '/api/v1/readings/typed', body)
    expect(answer.status).toBe(422)
    expect(await answer.json()).toMatchObject({ fields: [{ path: 'airTempC', message: 'A shell room is not hotter than 60 °C.' }] })
  })
})

describe('POST /api/v1/readings', () => {
  const send = (readings: unknown[], token = sensorToken.token, rest: object = {}) =>
    newClient(server.baseUrl).fetch('/api/v1/readings', {
      method: 'POST',
      headers: { authorization: `Bearer ${token}`, 'content-type': 'application/json' },
      body: JSON.stringify({ readings, ...rest }),
    })

  type Notes = { index: number; reason: string }[]
  type Answer = { accepted: number; repeated: number; rejected: Notes; marked: Notes; clockOffsetSeconds: number | null }

  it('keeps every reading, marks what no room can be, and answers each row that is none; again, it changes nothing', async () => {
    const now = Date.now()
    const rows = [
      { measuredAt: now - 10 * MINUTE, airTempC: 21, relHumidityPct: 50 },
      { measuredAt: now - 5 * MINUTE, airTempC: 88, relHumidityPct: 50 },
      { measuredAt: new Date(now - 4 * MINUTE).toISOString(), airTempC: 21.2, relHumidityPct: 100.3 },
      { measuredAt: now + 10 * MINUTE, airTempC: 21, relHumidityPct: 50 },
      { measuredAt: now - 40 * 24 * 60 * MINUTE, airTempC: 21, relHumidityPct: 50 },
      { measuredAt: now, airTempC: '21', relHumidityPct: 50 },
      { measuredAt: now, airTempC: 21, relHumidityPct: 50, pressurePa: 1013 },
    ]
    const first = (await (await send(rows)).json()) as Answer
    expect(first).toMatchObject({ accepted: 3, repeated: 0 })
    expect(first.rejected.map(({ index }) => index)).toEqual([3, 4, 5, 6])
    expect(first.rejected[3]?.reason).toContain('101325, not 1013.25')
    expect(first.marked).toEqual([{ index: 1, reason: expect.stringContaining('No shell room is like this') }])
    expect(await (await send(rows)).json()).toMatchObject({ accepted: 0, repeated: 3, marked: first.marked })
  })

  it('says when the clock of the sender is off, by its own time or by a row that lies ahead, and keeps it with the sensor', async () => {
    const { Sensor } = await import('@/models')
    const row = { measuredAt: Date.now(), airTempC: 21, relHumidityPct: 50 }
    const offset = async (rows: unknown[], rest: object) =>
      ((await (await send(rows, sensorToken.token, rest)).json()) as Answer).clockOffsetSeconds
    expect(await offset([row], { sentAt: Date.now() + 7 * MINUTE, batteryPct: 12 })).toBeCloseTo(420, -1)
    expect(await Sensor.findByPk(foundry.sensorId, { raw: true })).toMatchObject({
      batteryPct: 12,
      clockOffsetSeconds: expect.closeTo(420, -1),
    })
    expect(await offset([{ ...row, measuredAt: Date.now() + 60 * MINUTE }], {})).toBeCloseTo(3600, -1)
    expect(await offset([row], {})).toBeNull()
    expect((await Sensor.findByPk(foundry.sensorId))?.clockOffsetSeconds).toBeNull()
    expect((await send([row], sensorToken.token, { batteryPct: 101 })).status).toBe(422)
  })

  it('gives the same hours and doses for the same rows in one batch, and in odd batches, twice and in a random order', async () => {
    const { DoseHour, Sensor, SetAsideReading } = await import('@/models')
    const { issueSensorToken } = await import('@/lib/commands/issue-sensor-token')
    const from = Math.floor(Date.now() / MINUTE) * MINUTE - 20 * 60 * MINUTE
    // Ten hours of weather with spikes, then seven hours in which nothing moves, then weather again.
    const rows = Array.from({ length: 240 }, (_, index) => {
      const isStuck = index >= 120 && index < 206
      const air = isStuck ? { airTempC: 20, relHumidityPct: 60 } : { airTempC: 18 + (index % 7) / 2, relHumidityPct: 45 + (index % 11) }
      return { measuredAt: from + index * 5 * MINUTE, ...air, ...(!isStuck && index % 41 === 20 && { relHumidityPct: 99 }) }
    })
    const sendTo = async (batches: (typeof rows)[]) => {
      const { id } = await Sensor.create({ name: `Loft ${batches.length}`, kind: 'logger', createdAt: from })
      const { token } = await issueSensorToken({ sensorId: id }, { member: null, clock: { now: () => Date.now() } })
      for (const batch of batches) expect((await send(batch, token)).status).toBe(200)
      const where = { where: { sensorId: id }, raw: true } as const
      const hours = await DoseHour.findAll({ ...where, attributes: { exclude: ['sensorId'] }, order: ['hourStart'] })
      const marks = (await SetAsideReading.findAll({ ...where, order: ['measuredAt'] })).map(({ measuredAt, reason }) => ({
        measuredAt,
        reason,
      }))
      return { hours, marks }
    }
    const shuffled = rows
      .map((row, index) => ({ row, key: (index * 7919) % 240 }))
      .toSorted((a, b) => a.key - b.key)
      .map(({ row }) => row)
    const odd = [0, 1, 8, 39, 100, 163].map((first, index, firsts) => shuffled.slice(first, firsts[index + 1] ?? 240))
    const [whole, pieces] = [await sendTo([rows]), await sendTo([...odd, ...odd.toReversed()])]
    expect(new Set(whole.marks.map(({ reason }) => reason))).toEqual(new Set(['jump', 'flat']))
    expect(pieces.marks).toEqual(whole.marks)
    const rounded = (hours: object[]): unknown =>
      JSON.parse(JSON.stringify(hours, (_key, value: unknown) => (typeof value === 'number' ? Number(value.toPrecision(12)) : value)))
    expect(rounded(pieces.hours)).toEqual(rounded(whole.hours))
  })

  it('is closed to a wrong token and to a revoked one', async () => {
    const { revokeSensorToken } = await import('@/lib/commands/revoke-sensor-token')
    const { issueSensorToken } = await import('@/lib/commands/issue-sensor-token')
    const clock = { now: () => Date.now() }
    const other = await issueSensorToken({ sensorId: foundry.sensorId }, { member: null, clock })
    const row = { measuredAt: Date.now(), airTempC: 21, relHumidityPct: 50 }
    expect((await send([row], other.token)).status).toBe(200)
    await revokeSensorToken({ tokenId: other.id }, { member: null, clock })
    expect((await send([row], other.token)).status).toBe(401)
    expect((await send([row], `${sensorToken.token}x`)).status).toBe(401)
  })

  it('takes at most 10,000 rows and 2 MiB', async () => {
    const row = { measuredAt: Date.now(), airTempC: 21, relHumidityPct: 50 }
    expect((await send(Array.from({ length: 10_001 }, () => row))).status).toBe(422)
    expect((await send([{ ...row, note: 'x'.repeat(3_000_000) }])).status).toBe(413)
  })
})
