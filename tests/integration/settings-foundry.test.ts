import { beforeAll, describe, expect, it } from 'vitest'
import { createBath } from '@/lib/commands/save-bath'
import { saveFoundry } from '@/lib/commands/save-foundry'
import { createPlace } from '@/lib/commands/save-place'
import { createSensor } from '@/lib/commands/save-sensor'
import type { Actor } from '@/lib/members/actor'
import { loadFloor } from '@/lib/queries/floor'
import { loadFoundrySettings } from '@/lib/queries/foundry-settings'
import type { PlaceInput } from '@/lib/room/place-input'
import { Bath, DoseHour, FoundryEvent, Place, Reading, Sensor } from '@/models'
import { buildAir, HOUR, NOW, stoppedClock, type TestFoundry } from '@/tests/factories/shell-room'

import { historyOf, kindsOf, openSettings, placeInputOf } from '@/tests/factories/settings'

let foundry: TestFoundry
let ines: Actor
const clock = stoppedClock()
const by = () => ({ member: ines, clock })
const placeInput = (overrides?: Partial<PlaceInput>) => placeInputOf(foundry, overrides)

beforeAll(async () => {
  ;({ foundry, ines } = await openSettings())
})

describe('the settings of the foundry', () => {
  it('are changed with what was before', async () => {
    const before = await loadFoundrySettings()
    await saveFoundry(before, by())
    expect(await kindsOf('foundry')).toEqual([])
    await saveFoundry({ ...before, name: 'High Moor', tempUnit: 'degF', bandHighTempC: 24 }, by())
    expect(await historyOf('foundry')).toMatchObject([
      {
        kind: 'settings changed',
        subjectName: 'High Moor',
        detail: {
          before: { name: 'Test foundry', tempUnit: 'degC', bandHighTempC: 23 },
          after: { name: 'High Moor', tempUnit: 'degF', bandHighTempC: 24 },
        },
      },
    ])
    await saveFoundry(before, by())
  })

  it('with another altitude leave the readings that are stored, and act on the next', async () => {
    const { sensorId } = await createSensor({ name: 'Summit', kind: 'logger' }, by())
    await buildAir(sensorId, NOW - HOUR, NOW - HOUR)
    const before = await loadFoundrySettings()
    const stored = await Reading.findOne({ where: { sensorId }, rejectOnEmpty: true })
    const hours = await DoseHour.findAll({ where: { sensorId }, raw: true })
    await saveFoundry({ ...before, altitudeM: 2000 }, by())
    expect((await Reading.findOne({ where: { sensorId }, rejectOnEmpty: true })).roomFactor).toBe(stored.roomFactor)
    expect(await DoseHour.findAll({ where: { sensorId }, raw: true })).toEqual(hours)
    await buildAir(sensorId, NOW, NOW)
    const [old, fresh] = await Reading.findAll({ where: { sensorId }, order: [['measuredAt', 'ASC']] })
    expect(old!.roomFactor).toBe(stored.roomFactor)
    // Thinner air cools a wet coat further.
    expect(fresh!.roomFactor).toBeGreaterThan(stored.roomFactor * 1.02)
    await saveFoundry(before, by())
  })

  it('at the lowest and the highest place of the form can be read again', async () => {
    const before = await loadFoundrySettings()
    for (const altitudeM of [-430, 5000]) {
      await saveFoundry({ ...before, altitudeM }, by())
      expect((await loadFloor({ now: NOW, trees: { on: 'floor' } })).foundry.pressurePa).toBeGreaterThan(50_000)
    }
    await saveFoundry(before, by())
  })
})

it('of a demo member is demo data', async () => {
  const demo = { member: { ...ines, isDemo: true }, clock }
  const { sensorId } = await createSensor({ name: 'Demo logger', kind: 'logger' }, demo)
  const { placeId } = await createPlace(placeInput({ sensorId }), demo)
  const { bathId } = await createBath({ name: 'Demo slurry', kind: 'face' }, demo)
  expect([await Sensor.findByPk(sensorId), await Place.findByPk(placeId), await Bath.findByPk(bathId)].map((row) => row?.isDemo)).toEqual([
    true,
    true,
    true,
  ])
  expect(await FoundryEvent.count({ where: { isDemo: true } })).toBe(3)
})
