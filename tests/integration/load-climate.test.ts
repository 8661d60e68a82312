import { beforeAll, describe, expect, it } from 'vitest'
import { hourStartOf } from '@/lib/drying/dose-hours'
import { loadReadingsInHours, loadReadingsInRange } from '@/lib/queries/load-climate'
import { database } from '@/models'
import { buildFoundry, HOUR, MINUTE, NOW, type TestFoundry } from '@/tests/factories/shell-room'

const READINGS = 105_120
let foundry: TestFoundry

beforeAll(async () => {
  foundry = await buildFoundry()
  await database.query(
    `INSERT INTO readings (sensor_id, measured_at, air_temp_c, rel_humidity_pct, room_factor, source, received_at)
     SELECT :sensorId, :now - value * :step, 21, 50, 1, 'sensor', :now FROM
       (WITH RECURSIVE n(value) AS (SELECT 0 UNION ALL SELECT value + 1 FROM n WHERE value < :count - 1) SELECT value FROM n)`,
    { replacements: { sensorId: foundry.sensorId, now: NOW, step: 5 * MINUTE, count: READINGS } },
  )
})

describe('readings of some hours', () => {
  const hours = Array.from({ length: 20 }, (_, index) => hourStartOf(NOW) - (1 + 9 * index) * HOUR)

  it('come with the nearest one before and after each hour', async () => {
    const [hour = 0] = hours
    const readings = await loadReadingsInHours(foundry.sensorId, [hour])
    expect(readings[0]?.measuredAt).toBe(hour - 5 * MINUTE)
    expect(readings.at(-1)?.measuredAt).toBe(hour + HOUR)
    expect(readings).toHaveLength(14)
  })

  it('cost by the hours, not by the year of readings behind them', async () => {
    // Each way once to warm up.
    const inTurn = async () => {
      for (const hour of hours) await loadReadingsInRange(foundry.sensorId, hour, hour + HOUR)
    }
    const atOnce = async () => {
      await loadReadingsInHours(foundry.sensorId, hours)
    }
    const timeOf = async (work: () => Promise<void>) => {
      const startedAt = performance.now()
      for (let round = 0; round < 5; round += 1) await work()
      return performance.now() - startedAt
    }
    await inTurn()
    await atOnce()
    const [one, all] = [await timeOf(inTurn), await timeOf(atOnce)]
    expect(all / one).toBeLessThan(3)
  })
})
