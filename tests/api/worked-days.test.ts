import { randomUUID } from 'node:crypto'
import fc from 'fast-check'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { RecessClass } from '@/lib/coats/vocabulary'
import { estimateAnswer } from '@/lib/drying/estimate-contract'
import { queue as queueSchema, type QueueTree } from '@/lib/queue/contract'
import type * as Factories from '@/tests/factories/shell-room'
import {
  DOSE_TOLERANCE,
  EARLY,
  LATE,
  MOISTURE_TOLERANCE,
  TIME_TOLERANCE_H,
  WORKED_DAYS,
  workedBody,
  type WorkedAir,
  type WorkedDay,
} from '@/tests/factories/worked-days'
import { newClient, signIn, type Client } from '@/tests/setup/client'
import { seedMember, startServer, type TestServer } from '@/tests/setup/server'

const HOUR = 3_600_000
/** Yesterday, on a whole hour as the worked days are: every one of them has ended by now. */
const START = Math.floor(Date.now() / HOUR) * HOUR - 30 * HOUR
const at = (hours: number) => Math.round(START + hours * HOUR)
const hoursAfterStart = (instant: number | null | undefined) => (instant == null ? NaN : (instant - START) / HOUR)

let server: TestServer
let member: Client
let factories: typeof Factories
let foundry: Factories.TestFoundry

beforeAll(async () => {
  server = await startServer()
  factories = await import('@/tests/factories/shell-room')
  foundry = await factories.buildFoundry()
  const { email, password } = await seedMember('operator')
  member = await signIn(server.baseUrl, email, password)
})
afterAll(() => server.stop())

type Row = { measuredAt: string; airTempC: number; relHumidityPct: number }
type Scene = { treeId: string; send: (rows: readonly Row[]) => Promise<void> }

/** As with any real sensor the last digit moves: one that stands still is taken to be stuck. */
const rowsOf = (airs: readonly WorkedAir[]): Row[] =>
  airs.map(([hours, airTempC, relHumidityPct], index) => ({
    measuredAt: new Date(at(hours)).toISOString(),
    airTempC,
    relHumidityPct: relHumidityPct + (index % 2) * 0.001,
  }))

const airsOf = ({ airs, until }: WorkedDay): readonly WorkedAir[] =>
  'constant' in airs
    ? Array.from({ length: until * 12 + 1 }, (_, index) => [index / 12, airs.constant.airTempC, airs.constant.relHumidityPct] as const)
    : airs

/** A room of its own with its sensor, and a tree in it whose coat of the day's need went on at the day's start. */
async function setUp({ name, airSpeedMps, need, dippedAt = 0 }: WorkedDay): Promise<Scene> {
  const { Sensor } = await import('@/models')
  const { issueSensorToken } = await import('@/lib/commands/issue-sensor-token')
  const sensor = await Sensor.create({ name: `${name} ${randomUUID()}`.slice(-60), kind: 'logger', createdAt: START })
  const { token } = await issueSensorToken({ sensorId: sensor.id }, { member: null, clock: { now: () => Date.now() } })
  const place = await factories.buildPlace({ sensorId: sensor.id, airSpeedMps })
  const recipeVersionId = await factories.buildRecipe(foundry, [
    { kind: 'backup', stucco: 'medium', need: need.referenceHours },
    { kind: 'seal', stucco: 'none', need: 12 },
  ])
  const tree = await factories.buildTree(foundry, {
    recipeVersionId,
    placeId: place.id,
    since: START - 24 * HOUR,
    // oxlint-disable-next-line typescript/no-unsafe-type-assertion -- the worked days name it as the door does
    recessClass: (need.recessClass ?? 'none') as RecessClass,
  })
  const body = factories.dipBody(foundry, [{ treeId: tree.id, coatNumber: 1, placeId: place.id }], {
    bathId: foundry.backupBathId,
    stucco: 'medium',
    drainSeconds: 60,
    dippedAt: at(dippedAt) - 60_000,
  })
  const dipped = await member.send('POST', '/api/v1/dips', body)
  expect(dipped.status, await dipped.clone().text()).toBe(201)
  const logger = newClient(server.baseUrl)
  return {
    treeId: tree.id,
    send: async (rows) => {
      const answer = await logger.fetch('/api/v1/readings', {
        method: 'POST',
        headers: { authorization: `Bearer ${token}`, 'content-type': 'application/json' },
        body: JSON.stringify({ readings: rows }),
      })
      expect(answer.status).toBe(200)
      expect(((await answer.json()) as { rejected: unknown[] }).rejected).toEqual([])
    },
  }
}

async function treeInQueue(treeId: string): Promise<QueueTree> {
  const response = await member.fetch('/api/v1/queue')
  return queueSchema.parse(await response.json()).trees.find((tree) => tree.id === treeId)!
}

/** What the product makes of the readings it holds, for the moment of each figure of the day. */
async function missesAt(treeId: string, day: WorkedDay): Promise<unknown[]> {
  const { loadFloor } = await import('@/lib/queries/floor')
  const misses = []
  for (const { hours, likely, low, high, moistureRatio } of day.doses) {
    const call = (await loadFloor({ now: at(hours), trees: { ids: [treeId] } })).trees[0]!.call!
    for (const [figure, actual, expected] of [
      ['likely', call.dose.likely, likely],
      ['low', call.dose.low, low],
      ['high', call.dose.high, high],
    ] as const) {
      if (expected !== undefined && Math.abs(actual / expected - 1) >= DOSE_TOLERANCE) misses.push({ hours, figure, actual, expected })
    }
    if (moistureRatio !== undefined && Math.abs(call.moistureRatio - moistureRatio) >= MOISTURE_TOLERANCE) {
      misses.push({ hours, figure: 'water', actual: call.moistureRatio, expected: moistureRatio })
    }
  }
  return misses
}

/** What a damp room may add to the pair at the most: the worked days know the base spread alone. */
const DAMP_AIR_H = 0.1

/** The likely time to the minute; the pair no narrower than the base spread has it, and wider only by what damp air adds. */
function lateOnes(dry: QueueTree['dry'], expected: WorkedDay['dry']): unknown[] {
  const wider = { earliest: -1, likely: 0, safe: 1 }
  const found = { earliest: dry?.earliestAt, likely: dry?.likelyAt, safe: dry?.safeAt }
  return (['earliest', 'likely', 'safe'] as const).flatMap((which) => {
    const [actual, wanted] = [hoursAfterStart(found[which]), expected[which]]
    if (wanted === undefined) return []
    const off = wider[which] === 0 ? Math.abs(actual - wanted) : wider[which] * (actual - wanted)
    const isRight = off > -TIME_TOLERANCE_H && off < TIME_TOLERANCE_H + Math.abs(wider[which]) * DAMP_AIR_H
    return isRight ? [] : [{ which, actual, wanted }]
  })
}

// Constructed cases, recomputed independently: see worked-days. The expected numbers, so not the figures of a run in good order.
describe.each(WORKED_DAYS)('through the doors: $name', (day) => {
  it('has the doses and times of the worked day, its readings sent in any order, twice, in odd batches', async () => {
    const rows = rowsOf(airsOf(day))
    const shuffled = fc.shuffledSubarray([...rows, ...rows], { minLength: 2 * rows.length })
    const cuts = fc.array(fc.integer({ min: 1, max: 2 * rows.length - 1 }), { minLength: 3, maxLength: 12 })
    await fc.assert(
      fc.asyncProperty(shuffled, cuts, async (sent, between) => {
        const scene = await setUp(day)
        const edges = [0, ...new Set(between), sent.length].toSorted((a, b) => a - b)
        for (const [index, from] of edges.slice(0, -1).entries()) await scene.send(sent.slice(from, edges[index + 1]))
        const tree = await treeInQueue(scene.treeId)
        expect(lateOnes(tree.dry, day.dry)).toEqual([])
        expect(await missesAt(scene.treeId, day)).toEqual([])
      }),
      { numRuns: 1, endOnFailure: true },
    )
  })
})

describe('through the doors', () => {
  it('a late batch changes what was told already', async () => {
    const missing = WORKED_DAYS.find((day) => day.airs === EARLY)!
    const { treeId, send } = await setUp(missing)
    await send(rowsOf(EARLY))
    expect(lateOnes((await treeInQueue(treeId)).dry, { likely: 4.65 })).toEqual([])
    await send(rowsOf(LATE).toReversed())
    expect(lateOnes((await treeInQueue(treeId)).dry, { likely: 3.84 })).toEqual([])
  })

  it('the estimate door says the same of the same readings', async () => {
    const day = WORKED_DAYS.find(({ name }) => name === 'a humid night on the rack')!
    const { treeId, send } = await setUp(day)
    await send(rowsOf(airsOf(day)))
    const shift = <Body>(body: Body): Body =>
      JSON.parse(
        JSON.stringify(body, (key, value: unknown) =>
          ['at', 'dippedAt', 'until'].includes(key) && (typeof value === 'number' || typeof value === 'string')
            ? new Date(value).getTime() - Date.UTC(2026, 8, 1, 18) + START
            : value,
        ),
      ) as Body
    const asked = shift({ ...workedBody(day), at: undefined })
    const answer = await member.send('POST', '/api/v1/drying/estimate', asked)
    const { dry } = estimateAnswer.parse(await answer.json())
    const told = (await treeInQueue(treeId)).dry!
    const inHours = (pair: { earliestAt: number | null; likelyAt: number | null; safeAt: number | null }) => ({
      earliest: hoursAfterStart(pair.earliestAt),
      likely: hoursAfterStart(pair.likelyAt),
      safe: hoursAfterStart(pair.safeAt),
    })
    expect(lateOnes(told, inHours(dry))).toEqual([])
  })
})
