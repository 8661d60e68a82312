import { beforeAll, describe, expect, it } from 'vitest'
import { bringToOffsets } from '@/jobs/correct-readings'
import { issueSensorToken } from '@/lib/commands/issue-sensor-token'
import { noteSender } from '@/lib/commands/note-sender'
import { recordReadings } from '@/lib/commands/record-readings'
import { replaceDevice } from '@/lib/commands/replace-device'
import { removeSensorOffset, saveSensorOffset } from '@/lib/commands/save-sensor-offset'
import type { Actor } from '@/lib/members/actor'
import { loadSensorDetail } from '@/lib/queries/sensor-detail'
import { loadSensorsToCorrect } from '@/lib/queries/sensors-to-correct'
import { sensorOfToken } from '@/lib/queries/sensor-of-token'
import { DoseHour, Foundry, Reading, Sensor, SensorOffset } from '@/models'
import { historyOf, kindsOf } from '@/tests/factories/settings'
import { buildFoundry, buildMember, HOUR, MINUTE, NOW, stoppedClock } from '@/tests/factories/shell-room'

let ines: Actor
const clock = stoppedClock()
const by = () => ({ member: ines, clock })

beforeAll(async () => {
  await buildFoundry()
  ines = await buildMember('supervisor', 'Ines')
})

let sensors = 0
const freshSensor = async () => (await Sensor.create({ name: `Sensor ${(sensors += 1)}`, kind: 'logger', createdAt: NOW })).id
/** Weather: a reading every five minutes from `from` hours before now, of which no two neighbours are alike. */
const weather = (from: number, to = 0) =>
  Array.from({ length: (from - to) * 12 + 1 }, (_, index) => ({
    measuredAt: NOW - from * HOUR + index * 5 * MINUTE,
    airTempC: 18 + (index % 9) / 2,
    relHumidityPct: 45 + (index % 13),
  }))
const record = (sensorId: number, rows: ReturnType<typeof weather>) =>
  recordReadings({ sensorId, source: 'sensor', enteredBy: null, rows }, { clock })
const correct = () => bringToOffsets({ pause: () => Promise.resolve() }).run({ clock, isStopping: () => false })
const offset = (hoursAgo: number, airTempOffsetK: number, relHumidityOffsetPct: number) => ({
  since: NOW - hoursAgo * HOUR,
  airTempOffsetK,
  relHumidityOffsetPct,
  note: '',
})
/** Sums of floating-point numbers may differ in their last digit with the order they were added in. */
const twelveDigits = (_key: string, value: unknown) => (typeof value === 'number' ? Number(value.toPrecision(12)) : value)
const kept = async (sensorId: number) => {
  const where = { where: { sensorId }, raw: true } as const
  const readings = await Reading.findAll({ ...where, attributes: { exclude: ['sensorId'] }, order: ['measuredAt'] })
  const hours = await DoseHour.findAll({ ...where, attributes: { exclude: ['sensorId'] }, order: ['hourStart'] })
  return { readings, hours: JSON.parse(JSON.stringify(hours, twelveDigits)) as unknown }
}

describe('an offset', () => {
  it('gives the same readings and hours whether it was there before them or is entered afterwards', async () => {
    const [early, late] = [await freshSensor(), await freshSensor()]
    for (const entry of [offset(60, -0.4, 3), offset(20, 0.5, 0)]) await saveSensorOffset(early, entry, by())
    await record(early, weather(72))
    await record(late, weather(72))
    for (const entry of [offset(20, 0.5, 0), offset(60, -0.4, 3)]) await saveSensorOffset(late, entry, by())
    expect(await kept(late)).not.toEqual(await kept(early))
    // 60 h of five-minute readings are 721.
    expect(await correct()).toEqual({ corrected: 721 })
    expect(await kept(late)).toEqual(await kept(early))
    expect(await loadSensorsToCorrect()).toEqual([])
    expect(await correct()).toEqual({ corrected: 0 })
  })

  it('keeps what the device said, and gives it back when the offset is taken away', async () => {
    const sensorId = await freshSensor()
    await record(sensorId, weather(30))
    const before = await kept(sensorId)
    await saveSensorOffset(sensorId, offset(10, 1, -2), by())
    await correct()
    const [at] = weather(10)
    expect(await Reading.findOne({ where: { sensorId, measuredAt: at!.measuredAt }, raw: true })).toMatchObject({
      rawAirTempC: before.readings.find(({ measuredAt }) => measuredAt === at!.measuredAt)?.airTempC,
      airTempC: before.readings.find(({ measuredAt }) => measuredAt === at!.measuredAt)!.airTempC + 1,
    })
    const entered = await SensorOffset.findOne({ where: { sensorId }, rejectOnEmpty: true })
    await removeSensorOffset(entered.id, by())
    await correct()
    expect(await kept(sensorId)).toEqual(before)
    expect(await kindsOf('sensor', String(sensorId))).toEqual(['offset entered', 'offset taken away'])
  })

  it('changes nothing but the air: each reading keeps the altitude with which it came', async () => {
    const foundry = await Foundry.findByPk(1, { rejectOnEmpty: true })
    const [moved, stayed] = [await freshSensor(), await freshSensor()]
    for (const sensorId of [moved, stayed]) await record(sensorId, weather(5))
    await saveSensorOffset(stayed, offset(5, 1, 1), by())
    await correct()
    await foundry.update({ altitudeM: 2000 })
    await saveSensorOffset(moved, offset(5, 1, 1), by())
    await correct()
    await foundry.update({ altitudeM: 0 })
    expect(await kept(moved)).toEqual(await kept(stayed))
  })

  it('is one for each instant; entered again it takes the place of the former, and history has both', async () => {
    const sensorId = await freshSensor()
    await saveSensorOffset(sensorId, offset(1, 1, 0), by())
    await saveSensorOffset(sensorId, offset(1, 2, 0), by())
    expect((await loadSensorDetail(sensorId, { clock }))?.offsets).toMatchObject([{ airTempOffsetK: 2, by: 'Ines' }])
    expect((await historyOf('sensor', String(sensorId))).at(-1)?.detail).toMatchObject({
      before: { airTempOffsetK: 1 },
      after: { airTempOffsetK: 2 },
    })
    await expect(saveSensorOffset(sensorId, offset(-1, 1, 0), by())).rejects.toMatchObject({
      extra: { fields: [{ path: 'since', message: 'This time lies ahead of the clock.' }] },
    })
  })

  it('stops between two pieces when the worker is to end, and the next pass goes on from there', async () => {
    const sensorId = await freshSensor()
    await record(sensorId, weather(60))
    await saveSensorOffset(sensorId, offset(60, 1, 0), by())
    let pauses = 0
    const job = bringToOffsets({ pause: () => Promise.resolve((pauses += 1)) })
    expect(await job.run({ clock, isStopping: () => pauses > 0 })).toEqual({ corrected: 300 })
    expect(await loadSensorsToCorrect()).toEqual([sensorId])
    expect(await correct()).toEqual({ corrected: 421 })
  })
})

describe('a device that is replaced', () => {
  it('leaves its places and readings to the next one, which begins without an offset and with a token of its own', async () => {
    const sensorId = await freshSensor()
    const old = await issueSensorToken({ sensorId }, by())
    await noteSender(sensorId, { batteryPct: 4, clockOffsetSeconds: 900 }, { clock })
    await saveSensorOffset(sensorId, offset(10, -1, 5), by())
    await record(sensorId, weather(10))
    const { token } = await replaceDevice(sensorId, { since: NOW - 2 * HOUR, serial: 'SN 4711', note: 'The old one fell' }, by())
    expect(await sensorOfToken(old.token)).toBeNull()
    expect(await sensorOfToken(token ?? '')).toMatchObject({ sensorId })
    await correct()
    const detail = await loadSensorDetail(sensorId, { clock })
    expect(detail).toMatchObject({
      devices: [{ since: NOW - 2 * HOUR, serial: 'SN 4711', note: 'The old one fell', by: 'Ines' }],
      offsets: [{ airTempOffsetK: 0, relHumidityOffsetPct: 0 }, { airTempOffsetK: -1 }],
      sensor: { batteryPct: null, clockOffsetSeconds: null },
    })
    const corrected = (await Reading.findAll({ where: { sensorId }, order: ['measuredAt'], raw: true })).filter(
      ({ rawAirTempC }) => rawAirTempC !== null,
    )
    expect(corrected.at(-1)?.measuredAt).toBe(NOW - 2 * HOUR - 5 * MINUTE)
    const lines = await historyOf('sensor', String(sensorId))
    expect(lines.map(({ kind }) => kind)).toEqual(['token issued', 'offset entered', 'token revoked', 'device replaced', 'token issued'])
    expect(JSON.stringify(lines)).not.toContain((token ?? '').split('_').slice(2).join('_'))
  })

  it('is not two at one time, and a wall hygrometer gets no token', async () => {
    const { id } = await Sensor.create({ name: 'Wall', kind: 'wall hygrometer', createdAt: NOW })
    const input = { since: NOW - HOUR, serial: '', note: '' }
    expect(await replaceDevice(id, input, by())).toEqual({ token: null })
    await expect(replaceDevice(id, input, by())).rejects.toMatchObject({ extra: { fields: [{ path: 'since' }] } })
    await expect(replaceDevice(id, { ...input, since: NOW + 1 }, by())).rejects.toMatchObject({ extra: { fields: [{ path: 'since' }] } })
  })
})

describe('what a sender tells of itself', () => {
  it('stands with its sensor: battery, clock, and what was marked in the last 24 h, of which the newest fifty are listed', async () => {
    const sensorId = await freshSensor()
    await noteSender(sensorId, { batteryPct: 12, clockOffsetSeconds: 420 }, { clock })
    await noteSender(sensorId, { batteryPct: undefined, clockOffsetSeconds: 430 }, { clock })
    const broken = weather(30).map((row) => ({ ...row, airTempC: 85 }))
    await record(sensorId, broken)
    const detail = await loadSensorDetail(sensorId, { clock })
    expect(detail?.sensor).toMatchObject({
      newest: null,
      batteryPct: 12,
      batteryAt: NOW,
      clockOffsetSeconds: 420,
      markedCount: 24 * 12 + 1,
    })
    expect(detail?.marked).toHaveLength(50)
    expect(detail?.marked[0]).toMatchObject({ measuredAt: NOW, reason: 'out of range', airTempC: 85 })
    await noteSender(sensorId, { batteryPct: undefined, clockOffsetSeconds: null }, { clock })
    expect((await Sensor.findByPk(sensorId))?.clockOffsetSeconds).toBeNull()
  })
})
