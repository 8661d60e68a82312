import { beforeAll, expect, it } from 'vitest'
import { recordReadings } from '@/lib/commands/record-readings'
import type { Actor } from '@/lib/members/actor'
import { Coat, Sensor } from '@/models'
import { buildFinishedCoats } from '@/tests/factories/finished-coats'
import {
  buildAir,
  buildFoundry,
  buildMember,
  buildPlace,
  buildRecipe,
  HOUR,
  MINUTE,
  NOW,
  stoppedClock,
  type TestFoundry,
} from '@/tests/factories/shell-room'

let foundry: TestFoundry
let maud: Actor
let versionId: string
/** The factory's coat: dipped 30 h ago, covered 10 h ago. */
const COVERED_AT = NOW - 10 * HOUR

beforeAll(async () => {
  foundry = await buildFoundry()
  maud = await buildMember('operator')
  versionId = await buildRecipe(foundry)
  // Nothing was read for two hours while the coats hung.
  await buildAir(foundry.sensorId, NOW - 31 * HOUR, NOW - 20 * HOUR)
  await buildAir(foundry.sensorId, NOW - 18 * HOUR, COVERED_AT - 10 * MINUTE)
  await buildFinishedCoats({ foundry, memberId: maud.id, recipeVersionId: versionId, count: 1 }, {})
  const other = await Sensor.create({ name: 'Other room', kind: 'logger', createdAt: NOW })
  const place = await buildPlace({ sensorId: other.id })
  await buildFinishedCoats({ foundry, memberId: maud.id, recipeVersionId: versionId, count: 1 }, { placeId: place.id })
})

const send = (measuredAt: number, airTempC = 21) =>
  recordReadings(
    { sensorId: foundry.sensorId, source: 'sensor', enteredBy: null, rows: [{ measuredAt, airTempC, relHumidityPct: 50 }] },
    { clock: stoppedClock() },
  )
const changedAt = async () =>
  (await Coat.findAll({ order: [['placeId', 'ASC']] })).map((coat) => [coat.placeId === foundry.placeId, coat.airChangedAt])

it('readings of the time after a coat was covered change nothing of it', async () => {
  await send(COVERED_AT + 5 * MINUTE)
  await send(COVERED_AT + 10 * MINUTE)
  expect(new Map((await changedAt()) as [boolean, number | null][])).toEqual(
    new Map([
      [true, null],
      [false, null],
    ]),
  )
})

it('one that comes late and says what was thought changes nothing', async () => {
  await send(NOW - 25 * HOUR + 2 * MINUTE)
  expect((await changedAt()).every(([, at]) => at === null)).toBe(true)
})

it('one that fills a gap marks the coats that hung by this sensor, and no others', async () => {
  await send(NOW - 19 * HOUR, 24)
  expect(new Map((await changedAt()) as [boolean, number | null][])).toEqual(
    new Map([
      [true, NOW],
      [false, null],
    ]),
  )
})
