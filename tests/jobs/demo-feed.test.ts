import { rmSync, statSync } from 'node:fs'
import { join } from 'node:path'
import { beforeAll, describe, expect, it, vi } from 'vitest'
import { recordReadings } from '@/lib/commands/record-readings'
import { demoAirAt } from '@/lib/demo/climate'
import { demoClimate } from '@/lib/demo/plan'
import { openShop, type DemoShop } from '@/lib/demo/open-shop'
import { keepDemoTokens, readDemoTokens } from '@/lib/demo/token-file'
import { sensorOfToken } from '@/lib/queries/sensor-of-token'
import { checkRows } from '@/lib/room/check-rows'
import { Foundry, inTransaction, Reading, Sensor } from '@/models'
import { demoFeed, feedDemo } from '@/jobs/demo-feed'

const MINUTE_MS = 60_000
const DAY_MS = 24 * 60 * MINUTE_MS
const START = Date.parse('2026-12-01T11:00:00Z')

let shop: DemoShop
let requests: number[] = []
let now = START
const clock = { now: () => now }
const context = { clock, isStopping: () => false }
const tokenFile = () => join(process.env['DATA_DIR'] ?? '', 'demo-tokens.json')

/** The door for readings, without the network before it. */
const door = vi.fn<typeof fetch>(async (_input, init) => {
  const headers = new Headers(init?.headers)
  const sensor = await sensorOfToken((headers.get('authorization') ?? '').replace('Bearer ', ''))
  if (!sensor) return new Response(null, { status: 401 })
  const { readings } = JSON.parse(init?.body as string) as { readings: unknown[] }
  const { rows, rejected } = checkRows(readings, now)
  if (rejected.length > 0) return new Response(null, { status: 422 })
  requests.push(rows.length)
  await recordReadings({ sensorId: sensor.sensorId, source: 'sensor', enteredBy: null, rows }, { clock })
  return Response.json({ accepted: rows.length })
})
const job = demoFeed({ fetch: door })

beforeAll(async () => {
  const hash = 'scrypt$1024$8$1$AAAA$AAAA'
  const keys = ['ines', 'maud', 'wren', 'tobias', 'halvard', 'oona'] as const
  const createdAt = START - 14 * DAY_MS
  await Foundry.create({ id: 1, name: 'Marram Lane', timeZone: 'Europe/London', altitudeM: 4, isDemo: true, setUpAt: createdAt, createdAt })
  shop = await inTransaction(() => openShop({ createdAt, passwordHashes: new Map(keys.map((key) => [key, hash] as const)) }))
  await keepDemoTokens(shop.sensorTokens)
  for (const sensorId of Object.values(shop.sensorIds)) {
    const rows = [{ measuredAt: START - 4 * MINUTE_MS, airTempC: 20, relHumidityPct: 55 }]
    await recordReadings({ sensorId, source: 'sensor', enteredBy: null, rows }, { clock })
  }
})

describe('the demo feed', () => {
  it('sends one reading of each sensor a minute, of the same air as the past', async () => {
    now = START + MINUTE_MS + 45_000
    requests = []
    expect(await job.run(context)).toEqual({ sent: 4 })
    now += MINUTE_MS
    expect(await job.run(context)).toEqual({ sent: 2 })
    expect(await job.run(context)).toEqual({ sent: 0 })
    const at = START + 2 * MINUTE_MS
    const stored = await Reading.findOne({ where: { sensorId: shop.sensorIds['net loft'], measuredAt: at } })
    expect(stored).toMatchObject(demoAirAt(demoClimate(START - 14 * DAY_MS, 'Europe/London'), 'net loft', at))
  })

  it('catches up after a pause in bounded requests, and leaves no hole', async () => {
    now = START + 10 * DAY_MS + 45_000
    requests = []
    const parts = { clock, fetch: door, baseUrl: 'http://127.0.0.1:3000', tokens: shop.sensorTokens }
    await feedDemo(parts)
    expect(requests.every((rows) => rows <= 2000)).toBe(true)
    const rows = await Reading.findAll({ where: { sensorId: shop.sensorIds['shell room'] }, order: ['measuredAt'] })
    const longest = Math.max(...rows.slice(1).map((row, index) => row.measuredAt - (rows[index]?.measuredAt ?? 0)))
    expect(longest).toBeLessThanOrEqual(5 * MINUTE_MS)
    expect(rows.at(-1)?.measuredAt).toBe(START + 10 * DAY_MS)
  })

  it('fails aloud when the door refuses, so that the next minute tries again', async () => {
    now += MINUTE_MS
    door.mockResolvedValueOnce(new Response(null, { status: 503 }))
    await expect(job.run(context)).rejects.toThrow('answered 503')
    expect(await job.run(context)).toEqual({ sent: 2 })
  })

  it('keeps its tokens to itself and makes new ones when they are lost', async () => {
    expect(statSync(tokenFile()).mode & 0o777).toBe(0o600)
    rmSync(tokenFile())
    now += MINUTE_MS
    expect(await job.run(context)).toEqual({ sent: 2 })
    const tokens = await readDemoTokens()
    expect(tokens?.map(({ name }) => name)).toEqual(['Shell room logger', 'Net loft logger'])
    expect(tokens?.map(({ token }) => token)).not.toEqual(shop.sensorTokens.map(({ token }) => token))
  })

  it("does nothing in a foundry of one's own", async () => {
    await Sensor.update({ isDemo: false }, { where: {} })
    now += MINUTE_MS
    requests = []
    expect(await job.run(context)).toEqual({ demo: false })
    expect(requests).toEqual([])
  })
})
