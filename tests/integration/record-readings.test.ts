import fc from 'fast-check'
import { beforeAll, describe, expect, it } from 'vitest'
import { recordReadings } from '@/lib/commands/record-readings'
import { hourDoses, hourStartOf } from '@/lib/drying/dose-hours'
import { roomFactor } from '@/lib/drying/room-factor'
import { roomSegments } from '@/lib/drying/room-segments'
import { loadClimateRows, loadHours, loadReadingsInHours, loadReadingsInRange } from '@/lib/queries/load-climate'
import { buildClimate } from '@/lib/room/climate'
import { roomDose } from '@/lib/drying/room-curve'
import { DoseHour, Reading, Sensor, SetAsideReading } from '@/models'
import { buildFoundry, HOUR, MINUTE, NOW } from '@/tests/factories/shell-room'

beforeAll(async () => {
  await buildFoundry()
})

let sensors = 0
const freshSensor = async () => (await Sensor.create({ name: `Sensor ${(sensors += 1)}`, kind: 'logger', createdAt: NOW })).id

const record = (
  sensorId: number,
  rows: { measuredAt: number; airTempC: number; relHumidityPct: number; pressurePa?: number }[],
  source: 'sensor' | 'typed' = 'sensor',
) => recordReadings({ sensorId, source, enteredBy: null, rows }, { clock: { now: () => NOW } })

const row = (minutes: number, relHumidityPct = 50, airTempC = 21) => ({ measuredAt: NOW + minutes * MINUTE, airTempC, relHumidityPct })

/** Sums of floating-point numbers may differ in their last digit with the order they were added in. */
const rounded = (value: unknown): unknown =>
  JSON.parse(JSON.stringify(value, (_key, inner: unknown) => (typeof inner === 'number' ? Number(inner.toPrecision(12)) : inner)))

describe('the hourly table', () => {
  it('is the same for rows in any order, in odd batches, sent twice', async () => {
    await fc.assert(
      fc.asyncProperty(
        fc.uniqueArray(fc.record({ minute: fc.integer({ min: 0, max: 900 }), rh: fc.integer({ min: 20, max: 99 }) }), {
          selector: (entry) => entry.minute,
          minLength: 2,
          maxLength: 25,
        }),
        fc.infiniteStream(fc.nat()),
        async (entries, stream) => {
          const rows = entries.map(({ minute, rh }) => row(minute, rh))
          const orderly = await freshSensor()
          await record(
            orderly,
            rows.toSorted((a, b) => a.measuredAt - b.measuredAt),
          )
          const shuffled = rows.map((value) => ({ value, key: stream.next().value ?? 0 })).toSorted((a, b) => a.key - b.key)
          const odd = await freshSensor()
          for (let from = 0; from < shuffled.length;) {
            const size = 1 + ((stream.next().value ?? 0) % 4)
            const batch = shuffled.slice(from, from + size).map(({ value }) => value)
            await record(odd, batch)
            await record(odd, batch)
            from += size
          }
          const hoursOf = async (sensorId: number) => {
            const last = Math.max(...rows.map((entry) => entry.measuredAt))
            return loadHours(sensorId, hourStartOf(NOW), hourStartOf(last))
          }
          expect(rounded(await hoursOf(odd))).toEqual(rounded(await hoursOf(orderly)))
        },
      ),
      { numRuns: 12 },
    )
  })

  it('equals the hours worked out from all readings at once', async () => {
    const sensorId = await freshSensor()
    for (const minutes of [0, 50, 25, 300, 310, 120]) await record(sensorId, [row(minutes, 40 + (minutes % 17))])
    const readings = await loadReadingsInRange(sensorId, NOW, NOW + 400 * MINUTE)
    const whole = hourDoses(roomSegments(readings, { now: NOW + 310 * MINUTE }), hourStartOf(NOW), hourStartOf(NOW) + 5 * HOUR)
    const stored = await loadHours(sensorId, hourStartOf(NOW), hourStartOf(NOW) + 5 * HOUR)
    expect(stored.map((hour) => hour.dose.likely)).toEqual(whole.map((hour) => expect.closeTo(hour.dose.likely, 12)))
    expect(stored.map((hour) => hour.gapMinutes)).toEqual(whole.map((hour) => expect.closeTo(hour.gapMinutes, 9)))
  })

  it('counts a row that is known already only once, and keeps the damper of two that contradict each other', async () => {
    const sensorId = await freshSensor()
    expect(await record(sensorId, [row(0), row(5)])).toMatchObject({ added: 2, repeated: 0 })
    expect(await record(sensorId, [row(5, 70), row(10)])).toMatchObject({ added: 1, repeated: 1 })
    const stored = () => Reading.findOne({ where: { sensorId, measuredAt: NOW + 5 * MINUTE }, raw: true })
    // Of two that contradict each other the damper one stands, whichever came first.
    expect(await stored()).toMatchObject({ relHumidityPct: 70 })
    expect(await record(sensorId, [row(5, 60)])).toMatchObject({ added: 0, repeated: 1 })
    expect(await stored()).toMatchObject({ relHumidityPct: 70 })
  })

  it('gives a dose, spliced with the readings of the end hours, that is that of all readings', async () => {
    const sensorId = await freshSensor()
    const rows = Array.from({ length: 12 * 24 }, (_, index) => row(index * 5, 45 + (index % 30), 18 + (index % 7)))
    await record(sensorId, rows)
    const now = NOW + 24 * HOUR
    const [from, to] = [NOW + 97 * MINUTE, NOW + 1203 * MINUTE]
    const refinedHours = [hourStartOf(from), hourStartOf(to)]
    const climate = buildClimate(
      {
        sensorId,
        hours: await loadHours(sensorId, NOW, now),
        readings: await loadReadingsInHours(sensorId, refinedHours),
        refinedHours,
        newest: null,
      },
      { now, timeZone: 'Europe/London' },
    )
    const all = roomSegments(await loadReadingsInRange(sensorId, NOW, now), { now })
    expect(roomDose(climate.curve, from, to).likely).toBeCloseTo(roomDose(all, from, to).likely, 9)
  })
})

describe('readings that cannot be', () => {
  const hours = (sensorId: number) => DoseHour.findAll({ where: { sensorId }, order: ['hourStart'], raw: true })
  const withoutSensor = (rows: object[]) => rows.map((one) => ({ ...one, sensorId: 0 }))
  const setAside = async (sensorId: number) =>
    (await SetAsideReading.findAll({ where: { sensorId }, order: ['measuredAt', 'reason'], raw: true })).map(
      ({ measuredAt, reason, relHumidityPct }) => [(measuredAt - NOW) / MINUTE, reason, relHumidityPct],
    )

  it('are set aside and give the same hours in any order, in odd batches, sent twice', async () => {
    const minute = fc.integer({ min: 0, max: 200 }).map((step) => step * 2.5)
    const air = fc.constantFrom([50, 21], [51, 21], [95, 21], [51, 33], [120, 21], [50, 70])
    // Long runs that do not move, cut here and there.
    const still = fc.record({ from: minute, count: fc.integer({ min: 10, max: 40 }) })
    await fc.assert(
      fc.asyncProperty(
        fc.array(fc.record({ at: minute, air }), { maxLength: 25 }),
        still,
        fc.array(fc.nat(), { minLength: 80, maxLength: 80 }),
        async (entries, run, keys) => {
          const rows = [
            ...Array.from({ length: run.count }, (_, index) => row(run.from + index * 15)),
            ...entries.map(({ at, air: [humidity, temp] }) => row(at, humidity, temp)),
          ]
          const [whole, odd] = [await freshSensor(), await freshSensor()]
          await record(whole, rows)
          const shuffled = rows.map((value, index) => ({ value, key: keys[index] ?? 0 })).toSorted((a, b) => a.key - b.key)
          for (let from = 0, size = 1; from < shuffled.length; from += size) {
            size = 1 + ((keys[from] ?? 0) % 13)
            const batch = shuffled.slice(from, from + size).map(({ value }) => value)
            await record(odd, batch)
            await record(odd, batch)
          }
          expect(await setAside(odd)).toEqual(await setAside(whole))
          expect(rounded(withoutSensor(await hours(odd)))).toEqual(rounded(withoutSensor(await hours(whole))))
        },
      ),
      { numRuns: 15 },
    )
  })

  it('are told for each row, again when they are sent again', async () => {
    const sensorId = await freshSensor()
    const rows = [row(10), row(5, 95), row(0), row(0, 50, 99)]
    const told = { marked: 2, marks: [null, 'jump', null, 'out of range'] }
    expect(await record(sensorId, rows)).toEqual({ added: 4, repeated: 0, ...told })
    expect(await record(sensorId, rows)).toEqual({ added: 0, repeated: 4, ...told })
    expect(await setAside(sensorId)).toEqual([
      [0, 'out of range', 50],
      [5, 'jump', 95],
    ])
  })

  it('count again once what came between shows that they were right', async () => {
    const sensorId = await freshSensor()
    await record(sensorId, [row(0), row(5, 95), row(10)])
    expect(await hours(sensorId)).toMatchObject([{ readingCount: 2 }])
    expect(await record(sensorId, [row(7, 94)])).toMatchObject({ added: 1, marked: 0 })
    expect(await setAside(sensorId)).toEqual([])
    expect(await hours(sensorId)).toMatchObject([{ readingCount: 4, maxRelHumidityPct: 95 }])
  })

  it('of a stuck sensor end the drying half an hour after the last that counts', async () => {
    const sensorId = await freshSensor()
    await record(
      sensorId,
      Array.from({ length: 120 }, (_, index) => row(index * 5)),
    )
    const now = NOW + 119 * 5 * MINUTE
    const climate = buildClimate(await loadClimateRows(sensorId, NOW, now, []), { now, timeZone: 'Europe/London' })
    expect(climate).toMatchObject({ isStale: true, newest: { measuredAt: NOW + 6 * HOUR } })
    expect(roomDose(climate.curve, NOW, now).likely).toBeCloseTo(roomDose(climate.curve, NOW, NOW + 6.5 * HOUR).likely, 12)
  })
})

describe('a barometer', () => {
  it('stands for the altitude where there is one', async () => {
    const sensorId = await freshSensor()
    await record(sensorId, [row(0), { ...row(5), pressurePa: 85_000 }])
    const [plain, measured] = await Reading.findAll({ where: { sensorId }, order: ['measuredAt'], raw: true })
    expect(plain).toMatchObject({ pressurePa: null, roomFactor: expect.closeTo(roomFactor(row(0), 101_325), 12) })
    expect(measured).toMatchObject({ pressurePa: 85_000, roomFactor: expect.closeTo(roomFactor(row(0), 85_000), 12) })
    expect(measured!.roomFactor).toBeGreaterThan(plain!.roomFactor)
  })
})
