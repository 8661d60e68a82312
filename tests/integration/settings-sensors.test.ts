import { beforeAll, describe, expect, it } from 'vitest'
import { issueSensorToken } from '@/lib/commands/issue-sensor-token'
import { revokeSensorToken } from '@/lib/commands/revoke-sensor-token'
import { createPlace, retirePlace } from '@/lib/commands/save-place'
import { createSensor, renameSensor, retireSensor, reuseSensor } from '@/lib/commands/save-sensor'
import type { Actor } from '@/lib/members/actor'
import { loadSensorList } from '@/lib/queries/sensor-list'
import type { PlaceInput } from '@/lib/room/place-input'
import { SensorToken } from '@/models'
import { buildAir, HOUR, NOW, stoppedClock, type TestFoundry } from '@/tests/factories/shell-room'

import { fieldRefusal, historyOf, kindsOf, openSettings, placeInputOf } from '@/tests/factories/settings'

let foundry: TestFoundry
let ines: Actor
const clock = stoppedClock()
const by = () => ({ member: ines, clock })
const placeInput = (overrides?: Partial<PlaceInput>) => placeInputOf(foundry, overrides)

beforeAll(async () => {
  ;({ foundry, ines } = await openSettings())
})

describe('a sensor', () => {
  it('is added, renamed and listed with its newest reading and its places', async () => {
    const { sensorId } = await createSensor({ name: 'Loft', kind: 'logger' }, by())
    await renameSensor(sensorId, { name: 'Net loft' }, by())
    await buildAir(sensorId, NOW - HOUR, NOW, { airTempC: 18, relHumidityPct: 60 })
    const { placeId } = await createPlace(placeInput({ name: 'Loft rail', sensorId }), by())
    expect((await loadSensorList({ clock })).inUse.find(({ id }) => id === sensorId)).toMatchObject({
      name: 'Net loft',
      newest: { measuredAt: NOW, airTempC: 18, relHumidityPct: expect.closeTo(60, 6) },
      places: ['Loft rail'],
    })
    expect((await historyOf('sensor', String(sensorId))).at(-1)?.detail).toMatchObject({
      before: { name: 'Loft' },
      after: { name: 'Net loft' },
    })
    await expect(retireSensor(sensorId, by())).rejects.toMatchObject({ code: 'conflict', message: expect.stringContaining('Loft rail') })
    await retirePlace(placeId, by())
    await retireSensor(sensorId, by())
    await expect(createSensor({ name: 'net Loft', kind: 'logger' }, by())).rejects.toMatchObject(
      fieldRefusal('name', /retired sensor is called Net loft/),
    )
    await expect(renameSensor(sensorId, { name: 'X' }, by())).rejects.toMatchObject({ code: 'conflict' })
  })

  it('has tokens whose lines in the history hold their id and nothing that speaks for it', async () => {
    const { sensorId } = await createSensor({ name: 'Post', kind: 'logger' }, by())
    const { id, token } = await issueSensorToken({ sensorId }, by())
    await revokeSensorToken({ tokenId: id }, by())
    await revokeSensorToken({ tokenId: id }, by())
    const lines = await historyOf('sensor', String(sensorId))
    expect(lines.map(({ kind }) => kind)).toEqual(['sensor added', 'token issued', 'token revoked'])
    const secret = token.split('_').slice(2).join('_')
    const stored = await SensorToken.findByPk(id)
    for (const text of [JSON.stringify(lines), JSON.stringify(await loadSensorList({ clock }))]) {
      expect(text).toContain(id)
      expect(text).not.toContain(secret)
      expect(text).not.toContain(stored?.secretSha256)
    }
  })

  it('that is retired loses its tokens for good', async () => {
    const { sensorId } = await createSensor({ name: 'Corner', kind: 'logger' }, by())
    await issueSensorToken({ sensorId }, by())
    await retireSensor(sensorId, by())
    await expect(issueSensorToken({ sensorId }, by())).rejects.toMatchObject({ code: 'conflict' })
    await reuseSensor(sensorId, by())
    const row = (await loadSensorList({ clock })).inUse.find(({ id }) => id === sensorId)
    expect(row?.tokens.map(({ revokedAt }) => revokedAt)).toEqual([NOW])
    expect(await kindsOf('sensor', String(sensorId))).toEqual([
      'sensor added',
      'token issued',
      'token revoked',
      'sensor retired',
      'sensor in use again',
    ])
  })
})
