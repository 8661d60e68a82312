import fc from 'fast-check'
import { beforeAll, describe, expect, it } from 'vitest'
import { recordReadings } from '@/lib/commands/record-readings'
import { hourDoses, hourStartOf } from '@/lib/drying/dose-hours'
import { roomSegments } from '@/lib/drying/room-segments'
import { loadHours, loadReadingsInHours, loadReadingsInRange } from '@/lib/queries/load-climate'
import { buildClimate } from '@/lib/room/climate'
import { roomDose } from '@/lib/drying/room-curve'
import { Reading, Sensor } from '@/models'
import { buildFoundry, HOUR, MINUTE, NOW } from '@/tests/factories/shell-room'

beforeAll(async () => {
  await buildFoundry()
})

let sensors = 0
const freshSensor = async () => (await Sensor.create({ name: `Sensor ${(sensors += 1)}`, kind: 'logger', createdAt: NOW })).id

const record = (
  sensorId: number,
  rows: { measuredAt: number; airTempC: number; relHumidityPct: number }[],
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
