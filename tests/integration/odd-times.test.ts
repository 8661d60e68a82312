import { beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { logDips } from '@/lib/commands/log-dips'
import { replaceDevice } from '@/lib/commands/replace-device'
import { changePlace } from '@/lib/commands/save-place'
import type { Actor } from '@/lib/members/actor'
import { loadFloor } from '@/lib/queries/floor'
import { loadSensorList } from '@/lib/queries/sensor-list'
import { DoseHour, Foundry, Place, Reading, Sensor } from '@/models'
import { placeInputOf } from '@/tests/factories/settings'
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

let foundry: TestFoundry
let maud: Actor
let sensorId: number
let placeId: string

beforeAll(async () => {
  foundry = await buildFoundry()
  maud = await buildMember('supervisor', 'Maud')
})
// 21 °C and 50 % in 1.0 m/s air at sea level: one reference hour an hour.
beforeEach(async () => {
  sensorId = (await Sensor.create({ name: `Room ${Math.random()}`, kind: 'logger', createdAt: NOW })).id
  placeId = (await buildPlace({ sensorId })).id
})

/** A tree whose first coat was dipped at an instant, in the air of this test. */
async function dipped(dippedAt: number): Promise<string> {
  const tree = await buildTree(foundry, { placeId, since: dippedAt - 24 * HOUR })
  const body = dipBody(foundry, [{ treeId: tree.id, coatNumber: 1, placeId }], { dippedAt, drainSeconds: 0 })
  await logDips(body, { member: maud, clock: stoppedClock(dippedAt) })
  return tree.id
}
const at = async (treeId: string, now: number) => (await loadFloor({ now, trees: { ids: [treeId] } })).trees[0]!
const doseAt = async (treeId: string, now: number) => (await at(treeId, now)).call!.dose.likely

describe('the first reading ever', () => {
  it('credits nothing of the hours before it', async () => {
    const treeId = await dipped(NOW)
    expect(await at(treeId, NOW + 2 * HOUR)).toMatchObject({ call: { isUnknown: true, dose: { likely: 0 } } })
    await buildAir(sensorId, NOW + 2 * HOUR, NOW + 3 * HOUR)
    expect(await doseAt(treeId, NOW + 2 * HOUR)).toBe(0)
    expect(await doseAt(treeId, NOW + 3 * HOUR)).toBeCloseTo(1, 4)
    expect(await DoseHour.min('hourStart', { where: { sensorId } })).toBe(NOW + 2 * HOUR)
  })
})

describe('another sensor in the middle of a coat', () => {
  it('goes on under the same name where the device was replaced', async () => {
    await buildAir(sensorId, NOW - HOUR, NOW + HOUR)
    const treeId = await dipped(NOW)
    await replaceDevice(sensorId, { since: NOW + HOUR, serial: '', note: '' }, { member: maud, clock: stoppedClock(NOW + HOUR) })
    await buildAir(sensorId, NOW + HOUR + 5 * MINUTE, NOW + 2 * HOUR)
    expect(await doseAt(treeId, NOW + 2 * HOUR)).toBeCloseTo(2, 4)
  })

  it('counts from the moment at which the place was given to it, and the former one until then', async () => {
    const other = await Sensor.create({ name: `Damp ${sensorId}`, kind: 'logger', createdAt: NOW })
    await buildAir(sensorId, NOW - HOUR, NOW + 2 * HOUR)
    // Saturated: nothing dries.
    await buildAir(other.id, NOW - HOUR, NOW + 2 * HOUR, { airTempC: 21, relHumidityPct: 100 })
    const treeId = await dipped(NOW)
    const { name } = await Place.findByPk(placeId, { rejectOnEmpty: true })
    const input = placeInputOf({ ...foundry, sensorId: other.id }, { name })
    await changePlace(placeId, input, 'now', { member: maud, clock: stoppedClock(NOW + HOUR) })
    expect(await doseAt(treeId, NOW + 2 * HOUR)).toBeCloseTo(1, 4)
  })
})

describe('the change to and from summer time', () => {
  it.each([
    ['forward, in London', 'Europe/London', '2026-03-29T01:00:00Z'],
    ['back, in London', 'Europe/London', '2026-10-25T01:00:00Z'],
    ['back, half an hour of it, on Lord Howe Island', 'Australia/Lord_Howe', '2026-04-04T15:00:00Z'],
  ])('takes nothing from a dose and adds nothing: %s', async (_name, timeZone, change) => {
    await Foundry.update({ timeZone }, { where: { id: 1 } })
    const dippedAt = Date.parse(change) - 2 * HOUR
    await buildAir(sensorId, dippedAt - HOUR, dippedAt + 4 * HOUR)
    const treeId = await dipped(dippedAt)
    for (const hours of [1, 2, 2.5, 3, 4]) expect(await doseAt(treeId, dippedAt + hours * HOUR)).toBeCloseTo(hours, 3)
    await Foundry.update({ timeZone: 'Europe/London' }, { where: { id: 1 } })
  })
})

describe('a server whose clock was set back', () => {
  it('counts nothing that lies ahead of it and loses nothing', async () => {
    await buildAir(sensorId, NOW - HOUR, NOW + 5 * HOUR)
    const treeId = await dipped(NOW)
    const readings = await Reading.count({ where: { sensorId } })
    const before = await at(treeId, NOW + 5 * HOUR)
    const back = await at(treeId, NOW + 90 * MINUTE)
    expect(back.call!.dose.likely).toBeCloseTo(1.5, 4)
    expect(back.call!.guardReachedAt).toBeNull()
    const { inUse } = await loadSensorList({ clock: stoppedClock(NOW + 90 * MINUTE) })
    expect(inUse.find(({ id }) => id === sensorId)?.newest?.measuredAt).toBe(NOW + 90 * MINUTE)
    // Sent again by a logger that goes by the server's clock.
    await buildAir(sensorId, NOW + HOUR, NOW + 90 * MINUTE)
    expect(await Reading.count({ where: { sensorId } })).toBe(readings)
    expect((await at(treeId, NOW + 5 * HOUR)).call!.dose.likely).toBeCloseTo(before.call!.dose.likely, 12)
  })
})

describe('another altitude', () => {
  it('counts for the readings that come', async () => {
    await buildAir(sensorId, NOW - HOUR, NOW + HOUR)
    await Foundry.update({ altitudeM: 2500 }, { where: { id: 1 } })
    await buildAir(sensorId, NOW + HOUR + 5 * MINUTE, NOW + 2 * HOUR)
    await Foundry.update({ altitudeM: 0 }, { where: { id: 1 } })
    const [first, second, third] = await DoseHour.findAll({ where: { sensorId }, order: ['hourStart'], raw: true })
    expect([first!.doseLikely, second!.doseLikely]).toEqual([expect.closeTo(1, 4), expect.closeTo(1, 4)])
    // Thinner air takes up water faster at the same temperature and humidity: 7 to 15 % at this height.
    expect(third!.doseLikely).toBeGreaterThan(1.05)
  })
})

describe('days without a reading', () => {
  it('are a gap that is credited low once the sensor is back, and unknown until then', async () => {
    await buildAir(sensorId, NOW - HOUR, NOW + HOUR)
    const treeId = await dipped(NOW)
    expect((await at(treeId, NOW + 72 * HOUR)).call!.dose.likely).toBeCloseTo(1.5, 4)
    expect((await at(treeId, NOW + 2 * HOUR)).call!.isUnknown).toBe(true)
    await buildAir(sensorId, NOW + 73 * HOUR, NOW + 74 * HOUR, { airTempC: 21, relHumidityPct: 75 })
    const { likely, low, high } = (await at(treeId, NOW + 73 * HOUR)).call!.dose
    // The damper end, half of it, and the drier end, over 72 h.
    const damp = (likely - 1) / 72
    expect(damp).toBeLessThan(0.6)
    expect([low - 1, high - 1]).toEqual([expect.closeTo(36 * damp, 3), expect.closeTo(72, 2)])
  })
})
