import { beforeAll, describe, expect, it } from 'vitest'
import { QueryTypes } from 'sequelize'
import { logDips } from '@/lib/commands/log-dips'
import { recordReadings } from '@/lib/commands/record-readings'
import type { Actor } from '@/lib/members/actor'
import { loadClimateExport } from '@/lib/queries/climate-export'
import { loadClimateSpans } from '@/lib/queries/climate-spans'
import { loadRoomPage } from '@/lib/queries/room'
import { loadRoomWhatIf } from '@/lib/queries/room-what-if'
import { climateRange } from '@/lib/room/climate-csv'
import type { RoomRange } from '@/lib/room/range'
import { roomWhatIf } from '@/lib/room/room-what-if-contract'
import { csvText } from '@/lib/server/csv'
import { DoseHour, FanHours, Foundry, Place, Reading, Sensor, database } from '@/models'
import {
  buildAir,
  buildFoundry,
  buildMember,
  buildPlace,
  buildTree,
  dipBody,
  HOUR,
  MINUTE,
  NOW,
  stoppedClock,
  type TestFoundry,
} from '@/tests/factories/shell-room'

const clock = stoppedClock()
const BAND = { lowTempC: 20, highTempC: 23, lowRhPct: 45, highRhPct: 58 }
let foundry: TestFoundry
let member: Actor

beforeAll(async () => {
  foundry = await buildFoundry()
  member = await buildMember('supervisor')
  await Foundry.update({ bandLowTempC: 20, bandHighTempC: 23, bandLowRhPct: 45, bandHighRhPct: 58 }, { where: { id: 1 } })
})

const newSensor = async (name: string) => (await Sensor.create({ name, kind: 'logger', createdAt: NOW })).id
const page = (sensorId: number, range: RoomRange) => loadRoomPage({ sensorId, range, tempUnit: 'degC', clock })
const at = (iso: string) => Date.parse(iso)

/** Whole hours of one temperature at 50 %, straight into the table: a fortnight of readings would take a minute. */
const layHours = (sensorId: number, from: number, to: number, airTempC: number) =>
  DoseHour.bulkCreate(
    Array.from({ length: (to - from) / HOUR }, (_, index) => ({
      sensorId,
      hourStart: from + index * HOUR,
      doseLikely: 1,
      doseLow: 1,
      doseHigh: 1,
      coveredMinutes: 60,
      gapMinutes: 0,
      hasTyped: false,
      typedCount: 0,
      readingCount: 12,
      meanAirTempC: airTempC,
      minAirTempC: airTempC,
      maxAirTempC: airTempC,
      meanRelHumidityPct: 50,
      maxRelHumidityPct: 50,
    })),
  )

describe('hours of some local days', () => {
  it('are 25 on the day that summer time ends and 23 on the day that it begins', async () => {
    const sensorId = await newSensor('Clock changes')
    await layHours(sensorId, at('2026-03-28T20:00:00Z'), at('2026-03-30T03:00:00Z'), 21)
    await layHours(sensorId, at('2026-10-24T20:00:00Z'), at('2026-10-26T03:00:00Z'), 21)
    const [spring, autumn] = await loadClimateSpans(
      sensorId,
      [
        { from: at('2026-03-29T00:00:00Z'), to: at('2026-03-29T23:00:00Z') },
        { from: at('2026-10-24T23:00:00Z'), to: at('2026-10-26T00:00:00Z') },
      ],
      BAND,
    )
    expect(spring).toMatchObject({ coveredMinutes: 23 * 60, gapMinutes: 0, readingCount: 23 * 12 })
    expect(autumn).toMatchObject({ coveredMinutes: 25 * 60, gapMinutes: 0, readingCount: 25 * 12 })
    expect(autumn!.dose.likely).toBe(25)
  })

  it('have the mean by time, the least, the most, and the minutes out of band', async () => {
    const sensorId = await newSensor('Two airs')
    const day = at('2026-06-01T00:00:00Z')
    await buildAir(sensorId, day, day + 6 * HOUR - 5 * MINUTE, { airTempC: 19, relHumidityPct: 62 })
    await buildAir(sensorId, day + 6 * HOUR, day + 24 * HOUR, { airTempC: 22, relHumidityPct: 50 })
    const [span] = await loadClimateSpans(sensorId, [{ from: day, to: day + 24 * HOUR }], BAND)
    expect([span!.minAirTempC, span!.maxAirTempC]).toEqual([19, 22])
    expect(span!.minRelHumidityPct).toBeCloseTo(50, 5)
    expect(span!.maxRelHumidityPct).toBeCloseTo(62, 5)
    expect(span!.meanAirTempC).toBeCloseTo((6 * 19 + 18 * 22) / 24, 5)
    expect(span!.meanRelHumidityPct).toBeCloseTo((6 * 62 + 18 * 50) / 24, 5)
    expect(span!.outOfTempMinutes).toBeCloseTo(6 * 60, 6)
    expect(span!.outOfRhMinutes).toBeCloseTo(6 * 60, 6)
  })

  it('that a typed reading holds speak with it', async () => {
    const sensorId = await newSensor('Hygrometer')
    const day = at('2026-06-02T00:00:00Z')
    // It holds for twelve hours, which the table knows once the next one has come.
    const rows = [6, 24].map((hour) => ({ measuredAt: day + hour * HOUR, airTempC: 18, relHumidityPct: 50 }))
    await recordReadings({ sensorId, source: 'typed', enteredBy: member.id, rows }, { clock })
    const [span] = await loadClimateSpans(sensorId, [{ from: day, to: day + 24 * HOUR }], BAND)
    expect(span).toMatchObject({ coveredMinutes: 12 * 60, meanAirTempC: 18, outOfTempMinutes: 12 * 60, outOfRhMinutes: 0, hasTyped: true })
  })

  it('are nothing where nothing was read', async () => {
    const [span] = await loadClimateSpans(await newSensor('Silent'), [{ from: NOW - 24 * HOUR, to: NOW }], BAND)
    expect(span).toMatchObject({ coveredMinutes: 0, meanAirTempC: null, outOfTempMinutes: 0 })
  })
})

describe('a fortnight and a year', () => {
  let sensorId: number

  beforeAll(async () => {
    sensorId = await newSensor('Long')
    // Readings first: they write the hours around them anew.
    await buildAir(sensorId, NOW - 2 * HOUR, NOW, { airTempC: 19, relHumidityPct: 50 })
    await layHours(sensorId, NOW - 40 * 24 * HOUR, NOW - 12 * 24 * HOUR, 21)
    // Five days without a reading.
    await layHours(sensorId, NOW - 7 * 24 * HOUR, NOW - 2 * HOUR, 19)
  })

  it('draw one point an hour, and leave open what was not read', async () => {
    const { points, from, to, closed } = await page(sensorId, '14d')
    expect(points.length).toBeLessThanOrEqual(14 * 24)
    expect(points.every((point) => point.kind === 'hour' && point.at >= from && point.at <= to)).toBe(true)
    const known = points.filter((point) => point.airTempC !== null).map((point) => point.at)
    expect(known.filter((time) => time > NOW - 11.9 * 24 * HOUR && time < NOW - 7.1 * 24 * HOUR)).toEqual([])
    // Nights of the fortnight, the last one over this morning.
    expect(closed.length).toBeGreaterThanOrEqual(10)
  })

  it('draw one point a local day', async () => {
    const { points, from } = await page(sensorId, '1y')
    expect(points).toHaveLength(366)
    expect(new Date(from).toISOString()).toBe('2025-10-12T23:00:00.000Z')
    expect(points.at(-1)).toMatchObject({ kind: 'day', airTempC: { likely: 19, low: 19, high: 19 } })
    expect(points.filter((point) => point.airTempC !== null)).toHaveLength(29 + 8)
  })

  it('count hours out of band and without readings from the first reading on', async () => {
    const { bandTable } = await page(sensorId, '14d')
    const hours = bandTable.rooms.find((room) => room.sensorId === sensorId)!
    // Tuesday 10:00 in London.
    expect(hours.today).toMatchObject({ elapsedMs: 10 * HOUR, outOfTempMs: 10 * HOUR, outOfRhMs: 0, unreadMs: 0 })
    expect(hours.week).toMatchObject({ elapsedMs: 34 * HOUR, outOfTempMs: 34 * HOUR })
    expect(hours.range).toMatchObject({ elapsedMs: 14 * 24 * HOUR, outOfTempMs: 7 * 24 * HOUR })
    expect(hours.range!.unreadMs).toBe(5 * 24 * HOUR)
    const year = (await page(sensorId, '1y')).bandTable.rooms.find((room) => room.sensorId === sensorId)!
    expect(year.range!.elapsedMs).toBe(40 * 24 * HOUR)
  })

  it('go out as files of what is drawn', async () => {
    const file = async (query: Record<string, string>) => {
      const answer = (await loadClimateExport(sensorId, climateRange.parse(query), { clock }))!
      return { name: answer.fileName, lines: csvText(answer.columns, answer.rows).trimEnd().split('\r\n') }
    }
    const fortnight = await file({ range: '14d' })
    expect(fortnight.name).toBe('climate-long-14d.csv')
    expect(fortnight.lines.length - 1).toBeLessThanOrEqual(14 * 24 + 1)
    const year = await file({ range: '1y', temp: 'degF' })
    expect(year.name).toBe('climate-long-1y.csv')
    expect(year.lines).toHaveLength(1 + 366)
    expect(year.lines[0]).toMatch(/^day,day_start_utc,sensor,mean_air_temp_degF,min_air_temp_degF,/)
    expect(year.lines.at(-1)).toMatch(/^2026-10-13,2026-10-12T23:00:00\.000Z,Long,66\.2,66\.2,66\.2,50,50,50,/)
    expect(climateRange.safeParse({ range: '1y', from: '2026-10-01', to: '2026-10-02' }).error?.issues[0]?.path).toEqual(['range'])
  })

  it('read the hourly table alone', async () => {
    const shown = async () => {
      const [fortnight, year] = [await page(sensorId, '14d'), await page(sensorId, '1y')]
      return [fortnight.points, year.points]
    }
    const before = await shown()
    await Reading.destroy({ where: { sensorId } })
    expect(await shown()).toEqual(before)
  })
})

describe('another air for a room', () => {
  it('weighs the trees that hang in it, and leaves those elsewhere alone', async () => {
    await buildAir(foundry.sensorId, NOW - 5 * 24 * HOUR, NOW, { airTempC: 20, relHumidityPct: 70 })
    const other = await newSensor('Loft')
    await buildAir(other, NOW - 5 * 24 * HOUR, NOW)
    const loft = await buildPlace({ sensorId: other, name: 'Loft rack' })
    const [here, there] = [await buildTree(foundry), await buildTree(foundry, { placeId: loft.id })]
    for (const [tree, placeId] of [
      [here, foundry.placeId],
      [there, loft.id],
    ] as const) {
      const body = dipBody(foundry, [{ treeId: tree.id, coatNumber: 1, placeId }], { dippedAt: NOW - 30 * MINUTE })
      await logDips(body, { member, clock })
    }
    const answer = await loadRoomWhatIf(foundry.sensorId, roomWhatIf.parse({ relHumidityPct: 50 }), { clock })
    expect(answer.trees.map((tree) => tree.tag)).toEqual([here.tag])
    const [tree] = answer.trees
    expect(tree!.after!.safeAt!).toBeLessThan(tree!.before!.safeAt! - HOUR)
    // The same words as the page's own clock.
    const row = (await page(foundry.sensorId, '48h')).rows.find((candidate) => candidate.tree.tag === here.tag)
    expect(tree!.before).toEqual(row!.asItStands)
    expect((await loadRoomWhatIf(other, roomWhatIf.parse({}), { clock })).trees.map(({ tag }) => tag)).toEqual([there.tag])
  })

  it('refuses a sensor that is not in use, and fans that are none', async () => {
    const weigh = (sensorId: number, body: object) => loadRoomWhatIf(sensorId, roomWhatIf.parse(body), { clock })
    await expect(weigh(4040, {})).rejects.toMatchObject({ code: 'not_found' })
    await expect(weigh(foundry.sensorId, { fansOnAt: [foundry.placeId] })).rejects.toMatchObject({
      code: 'unprocessable',
      extra: { fields: [{ path: 'fansOnAt.0' }] },
    })
    await Place.update({ airSpeedFansOnMps: 1.5, airSpeedFansOffMps: 0.2 }, { where: { id: foundry.placeId } })
    await FanHours.create({ placeId: foundry.placeId, weekday: 2, onMinute: 420, offMinute: 660 })
    expect((await weigh(foundry.sensorId, { fansOnAt: [foundry.placeId] })).soonerMs).toBeGreaterThan(0)
  })
})

it('no query of the page looks through readings, hours or coats', async () => {
  const asked: string[] = []
  // Sequelize has it, and does not say so.
  const { options } = database as unknown as { options: { logging: false | ((sql: string) => void) } }
  options.logging = (sql) => asked.push(sql)
  try {
    for (const range of ['48h', '14d', '1y'] as const) await page(foundry.sensorId, range)
    await loadRoomWhatIf(foundry.sensorId, roomWhatIf.parse({ relHumidityPct: 50 }), { clock })
  } finally {
    options.logging = false
  }
  const queries = [...new Set(asked.map((line) => line.replace(/^Executing \([^)]*\): /, '')))].filter((sql) => /^(SELECT|WITH)/.test(sql))
  expect(queries.some((sql) => sql.includes('dose_hours'))).toBe(true)
  const scans: string[] = []
  for (const sql of queries) {
    const plan = await database.query<{ detail: string }>(`EXPLAIN QUERY PLAN ${sql}`, { type: QueryTypes.SELECT })
    const named = new Map(
      [...sql.matchAll(/\b(readings|dose_hours|coats|coat_looks|tree_events|tree_places)\s+(?:AS\s+)?([a-z])\b/g)].map(
        ([, table, alias]) => [alias, table],
      ),
    )
    for (const { detail } of plan) {
      const [, name = ''] = /^SCAN (\S+)/.exec(detail) ?? []
      const table = named.get(name) ?? name
      if (['readings', 'dose_hours', 'coats', 'coat_looks', 'tree_events', 'tree_places'].includes(table)) scans.push(`${detail}: ${sql}`)
    }
  }
  expect(scans).toEqual([])
})
