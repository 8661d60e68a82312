import { beforeAll, describe, expect, it } from 'vitest'
import { logDips } from '@/lib/commands/log-dips'
import { recordTypedReading } from '@/lib/commands/record-typed-reading'
import { recordReadings } from '@/lib/commands/record-readings'
import { newId } from '@/lib/core/ids'
import type { Actor } from '@/lib/members/actor'
import { loadClimateExport } from '@/lib/queries/climate-export'
import { loadRoomPage } from '@/lib/queries/room'
import { loadTreeDetail } from '@/lib/queries/tree-detail'
import { climateRange } from '@/lib/room/climate-csv'
import type { RoomRange } from '@/lib/room/range'
import { csvText } from '@/lib/server/csv'
import { DoseHour, FormerAir, Reading, Sensor, TreePlace } from '@/models'
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
let foundry: TestFoundry
let member: Actor

beforeAll(async () => {
  foundry = await buildFoundry()
  member = await buildMember('supervisor')
})

const page = (sensorId: number | null = null, range: RoomRange = '48h') => loadRoomPage({ sensorId, range, tempUnit: 'degC', clock })

describe('the Room page', () => {
  it('stands while nobody has read anything and no tree hangs', async () => {
    const empty = await page()
    expect(empty).toMatchObject({ headline: { title: 'The air is not known' }, rows: [], points: [], things: [] })
    expect(empty.room?.sensorId).toBe(foundry.sensorId)
  })

  it('draws a day of hours, the newest readings and a day of forecast, however many readings there are', async () => {
    await buildAir(foundry.sensorId, NOW - 10 * 24 * HOUR, NOW)
    const { points, headline, shiftSpeeds } = await page()
    expect(points.length).toBeLessThan(100)
    expect(points.filter((point) => point.kind === 'forecast')).toHaveLength(24)
    expect(points.filter((point) => point.kind === 'now')).toHaveLength(1)
    for (const [index, point] of points.entries()) expect(point.at).toBeGreaterThanOrEqual(points[index - 1]?.at ?? 0)
    expect(points.every((point) => Math.abs((point.speed?.likely ?? 0) - 1) < 0.01)).toBe(true)
    expect(headline.title).toBe('Nothing is drying now')
    expect(shiftSpeeds.map((shift) => shift.name)).toEqual(['Mon day', 'Mon night', 'Tue day', 'Tue night'])
    expect(shiftSpeeds.map((shift) => shift.when)).toEqual(['past', 'past', 'now', 'forecast'])
  })

  it('has a row for a drying tree, a bar, and what to do', async () => {
    const tree = await buildTree(foundry)
    await logDips(dipBody(foundry, [{ treeId: tree.id, coatNumber: 1 }], { dippedAt: NOW - 30 * MINUTE }), { member, clock })
    const { rows, bars } = await page()
    expect(rows).toMatchObject([{ tree: { tag: tree.tag }, toDo: 'Dip 2 in this shift.' }])
    expect(Math.abs(rows[0]!.lostMs!)).toBeLessThan(2 * MINUTE)
    expect(bars).toMatchObject([{ tag: tree.tag, coatNumber: 1, dippedAt: NOW - 30 * MINUTE }])
  })

  it('says what a silent sensor does to its trees, and goes on with the rooms that speak', async () => {
    const silent = await Sensor.create({ name: 'Net loft logger', kind: 'logger', createdAt: NOW })
    const loft = await buildPlace({ sensorId: silent.id, name: 'Loft' })
    const tree = await buildTree(foundry, { placeId: loft.id })
    await buildAir(silent.id, NOW - 30 * HOUR, NOW - 20 * HOUR)
    await logDips(dipBody(foundry, [{ treeId: tree.id, coatNumber: 1, placeId: loft.id }], { dippedAt: NOW - 30 * MINUTE }), {
      member,
      clock,
    })
    const { rows, things, rooms } = await page(silent.id)
    expect(rows.at(-1)).toMatchObject({
      tree: { tag: tree.tag },
      lostMs: null,
      asItStands: null,
      toDo: 'Check its sensor; until then confirm by touch.',
    })
    expect(things[0]).toMatchObject({ title: 'Check the Net loft logger' })
    expect(rooms.map((room) => room.isStale)).toEqual([false, true])
    await tree.update({ scrappedAt: NOW })
  })

  it('proposes no place that is out of use', async () => {
    const still = await buildPlace({ name: 'Still corner', airSpeedMps: 0.1 })
    const windy = await buildPlace({ name: 'Old fan rack', airSpeedMps: 2.5 })
    const tree = await buildTree(foundry, { placeId: still.id })
    await logDips(dipBody(foundry, [{ treeId: tree.id, coatNumber: 1, placeId: still.id }], { dippedAt: NOW - 30 * MINUTE }), {
      member,
      clock,
    })
    const toDo = async () => (await page()).rows.find((row) => row.tree.tag === tree.tag)?.toDo
    await windy.update({ retiredAt: NOW })
    expect(await toDo()).not.toContain('Old fan rack')
    await tree.update({ scrappedAt: NOW })
  })
})

it('the coats that dried here are those of the sensor that the place had then', async () => {
  const [before, after] = await Promise.all(['Before', 'After'].map((name) => Sensor.create({ name, kind: 'logger', createdAt: NOW })))
  const place = await buildPlace({ sensorId: after!.id })
  const air = { placeId: place.id, airSpeedFansOnMps: 1, airSpeedFansOffMps: 1, fanHours: [] }
  await FormerAir.create({ id: newId(), until: NOW - 2 * HOUR, sensorId: before!.id, ...air })
  await buildAir(before!.id, NOW - 30 * HOUR, NOW)
  await buildAir(after!.id, NOW - 30 * HOUR, NOW)
  const tree = await buildTree(foundry, { placeId: place.id })
  const dip = (coatNumber: number, hoursAgo: number) =>
    logDips(dipBody(foundry, [{ treeId: tree.id, coatNumber, placeId: place.id }], DIPS[coatNumber - 1]!(NOW - hoursAgo * HOUR)), {
      member,
      clock,
    })
  const DIPS = [
    (dippedAt: number) => ({ dippedAt }),
    (dippedAt: number) => ({ dippedAt, bathId: foundry.backupBathId, stucco: 'medium' as const }),
    (dippedAt: number) => ({ dippedAt, bathId: foundry.backupBathId, stucco: 'coarse' as const }),
  ]
  await dip(1, 20)
  await dip(2, 12)
  await dip(3, 1)
  const dried = async (sensorId: number) =>
    (await page(sensorId)).dried.coats.filter((coat) => coat.tag === tree.tag).map((coat) => coat.coatNumber)
  expect(await dried(before!.id)).toEqual([1])
  expect(await dried(after!.id)).toEqual([2])
  await tree.update({ scrappedAt: NOW })
})

describe('a typed reading', () => {
  const typed = (overrides: object = {}) =>
    recordTypedReading(
      { operationId: newId(), sensorId: foundry.sensorId, airTempC: 19.5, relHumidityPct: 61, ...overrides },
      { member, clock },
    )

  it('counts from the time that was named', async () => {
    const measuredAt = NOW - 3 * HOUR + 2 * MINUTE
    expect((await typed({ measuredAt })).response).toMatchObject({ measuredAt })
    expect(await Reading.findOne({ where: { measuredAt, source: 'typed' } })).toMatchObject({ airTempC: 19.5, enteredBy: member.id })
  })

  it.each([
    ['ahead of the clock', NOW + 10 * MINUTE, 'This time lies ahead of the clock.'],
    ['long ago', NOW - 40 * 24 * HOUR, 'This time lies more than 31 days back.'],
  ])('is refused beside its field when it lies %s', async (_what, measuredAt, message) => {
    await expect(typed({ measuredAt })).rejects.toMatchObject({
      code: 'unprocessable',
      extra: { fields: [{ path: 'measuredAt', message }] },
    })
  })
})

describe('the climate file', () => {
  const file = async (query: Record<string, string>, sensorId = foundry.sensorId) => {
    const answer = await loadClimateExport(sensorId, climateRange.parse(query), { clock })
    return { ...answer!, lines: csvText(answer!.columns, answer!.rows).trimEnd().split('\r\n') }
  }

  it('has what is drawn: a day of hours and a day of forecast, units in the heads', async () => {
    const { lines, fileName } = await file({})
    expect(fileName).toBe('climate-shell-room.csv')
    expect(lines[0]).toMatch(/^kind,hour_start_utc,hour_start_local,sensor,mean_air_temp_degC,/)
    const kinds = lines.slice(1).map((line) => line.split(',')[0])
    expect(kinds.filter((kind) => kind === 'forecast')).toHaveLength(24)
    expect(kinds.filter((kind) => kind !== 'forecast').length).toBeGreaterThanOrEqual(24)
    expect(lines[1]).toContain('T09:00:00.000Z,2026-10-12T10:00:00.000+01:00,Shell room,21,21,21,50,50,')
  })

  it('has whole local days, and gives temperatures in the unit that was asked for', async () => {
    const { lines, fileName } = await file({ from: '2026-10-11', to: '2026-10-12', temp: 'degF' })
    expect(fileName).toBe('climate-shell-room-2026-10-11-to-2026-10-12.csv')
    expect(lines).toHaveLength(1 + 48)
    expect(lines[1]).toContain('2026-10-10T23:00:00.000Z,2026-10-11T00:00:00.000+01:00,Shell room,69.8,')
    expect(lines[0]).toContain('dew_point_degF')
  })

  it('has twenty-five hours on the day that summer time ends', async () => {
    const sensor = await Sensor.create({ name: 'Autumn', kind: 'logger', createdAt: NOW })
    await buildAir(sensor.id, Date.parse('2026-10-24T20:00:00Z'), Date.parse('2026-10-26T03:00:00Z'))
    const { lines } = await file({ from: '2026-10-25', to: '2026-10-25' }, sensor.id)
    expect(lines).toHaveLength(1 + 25)
    expect(lines.filter((line) => line.includes(',2026-10-25T01:00:00.000'))).toHaveLength(2)
  })

  it('runs no formula in a spreadsheet', async () => {
    const sensor = await Sensor.create({ name: '=HYPERLINK("http://evil.example")', kind: 'logger', createdAt: NOW })
    await recordReadings(
      { sensorId: sensor.id, source: 'sensor', enteredBy: null, rows: [{ measuredAt: NOW - HOUR, airTempC: -4.5, relHumidityPct: 50 }] },
      { clock },
    )
    const { lines, fileName } = await file({ from: '2026-10-13', to: '2026-10-13' }, sensor.id)
    expect(lines[1]).toContain(`"'=HYPERLINK(""http://evil.example"")"`)
    // Numbers below zero stay numbers.
    expect(lines[1]).toContain(',-4.5,')
    expect(fileName).toBe('climate-hyperlink-http-evil-example-2026-10-13-to-2026-10-13.csv')
  })

  it('is none of a sensor that there never was', async () => {
    expect(await loadClimateExport(4040, climateRange.parse({}), { clock })).toBeNull()
  })

  it.each([
    [{ from: '2026-10-01' }, 'to'],
    [{ from: '2026-10-02', to: '2026-10-01' }, 'to'],
    [{ from: '2026-09-01', to: '2026-10-02' }, 'to'],
    [{ from: 'yesterday', to: '2026-10-01' }, 'from'],
    [{ temp: 'K' }, 'temp'],
  ])('refuses %o, naming the field', (query, path) => {
    expect(climateRange.safeParse(query).error?.issues[0]?.path).toEqual([path])
  })

  it('takes thirty-one days at once', () => {
    expect(climateRange.safeParse({ from: '2026-10-01', to: '2026-10-31' }).success).toBe(true)
  })
})

describe('the climate chart of a tree that was moved', () => {
  it.each([
    ['a few hours ago, by its readings', 6],
    ['two days ago, by its hours', 60],
  ])('%s, shows each room for as long as it hung there', async (_when, hoursAgo) => {
    const warm = await Sensor.create({ name: `Warm ${hoursAgo}`, kind: 'logger', createdAt: NOW })
    const cold = await Sensor.create({ name: `Cold ${hoursAgo}`, kind: 'logger', createdAt: NOW })
    const first = await buildPlace({ sensorId: cold.id })
    const second = await buildPlace({ sensorId: warm.id })
    await buildAir(cold.id, NOW - 80 * HOUR, NOW, { airTempC: 15, relHumidityPct: 98 })
    await buildAir(warm.id, NOW - 80 * HOUR, NOW, { airTempC: 25, relHumidityPct: 98 })
    const tree = await buildTree(foundry, { placeId: first.id })
    await logDips(dipBody(foundry, [{ treeId: tree.id, coatNumber: 1, placeId: first.id }], { dippedAt: NOW - hoursAgo * HOUR }), {
      member,
      clock,
    })
    const movedAt = NOW - (hoursAgo / 2) * HOUR
    await TreePlace.create({ id: newId(), treeId: tree.id, placeId: second.id, since: movedAt })
    const detail = await loadTreeDetail({ tag: tree.tag, viewer: { id: member.id, role: 'supervisor' }, clock })
    const wrong = detail!.climate.filter((point) => point.airTempC !== (point.at < movedAt ? 15 : 25) && point.at !== movedAt)
    expect(detail!.climate.length).toBeGreaterThan(5)
    expect(wrong).toEqual([])
    expect(new Set(detail!.climate.map((point) => point.airTempC))).toEqual(new Set([15, 25]))
    await tree.update({ scrappedAt: NOW })
  })
})

it('the page costs by the hours, not by the readings', async () => {
  // The hours of a fortnight are all that the page asks of the past: with them gone, so is the forecast.
  await DoseHour.destroy({ where: { sensorId: foundry.sensorId } })
  const { points } = await page(foundry.sensorId)
  expect(points.filter((point) => point.kind === 'hour')).toEqual([])
  expect(new Set(points.filter((point) => point.kind === 'forecast').map((point) => point.speed?.likely)).size).toBe(1)
})
