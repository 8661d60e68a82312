import { addFoundryEvent } from '@/lib/commands/foundry-event'
import { issueSensorToken } from '@/lib/commands/issue-sensor-token'
import { refuseField } from '@/lib/commands/refuse-field'
import { revokeSensorToken } from '@/lib/commands/revoke-sensor-token'
import { correctFrom } from '@/lib/commands/save-sensor-offset'
import { stopBeingDemo } from '@/lib/commands/stop-being-demo'
import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import { newId } from '@/lib/core/ids'
import type { Actor } from '@/lib/members/actor'
import type { DeviceInput } from '@/lib/room/sensor-forms'
import { offsetAt } from '@/lib/room/sensor-offsets'
import { inTransaction, Sensor, SensorDevice, SensorOffset, SensorToken } from '@/models'

const NO_OFFSET = { airTempOffsetK: 0, relHumidityOffsetPct: 0, note: 'New device' }

/**
 * Another device takes over a sensor: its places, charts and history go on. The tokens of the old one end, the new one begins without
 * an offset, and what was known of battery and clock is forgotten.
 *
 * @returns a token for the new logger, for this one time; null for a wall hygrometer.
 * @throws {AppError} not_found; conflict for a retired sensor, with `fields` for a time ahead of the clock or one at which a device came already.
 */
export function replaceDevice(
  sensorId: number,
  input: DeviceInput,
  { member, clock }: { member: Actor; clock: Clock },
): Promise<{ token: string | null }> {
  return inTransaction(async () => {
    const now = clock.now()
    const by = { member, clock: { now: () => now } }
    const sensor = await Sensor.findByPk(sensorId)
    if (!sensor) throw new AppError('not_found', 'There is no such sensor.')
    if (sensor.retiredAt !== null) throw new AppError('conflict', `${sensor.name} is retired.`)
    const { since = now, serial, note } = input
    if (since > now) refuseField('since', 'This time lies ahead of the clock.')
    if ((await SensorDevice.count({ where: { sensorId, since } })) > 0) refuseField('since', 'A device was hung up at this time already.')
    await SensorDevice.create({ id: newId(now), sensorId, since, serial, note, notedBy: member.id, notedAt: now })
    await beginWithoutOffset(sensor, since, by)
    for (const { id } of await SensorToken.findAll({ where: { sensorId, revokedAt: null } })) await revokeSensorToken({ tokenId: id }, by)
    await sensor.update({ batteryPct: null, batteryAt: null, clockOffsetSeconds: null })
    await stopBeingDemo(sensor, member)
    await addFoundryEvent(
      { type: 'sensor', id: String(sensorId), name: sensor.name },
      {
        kind: 'device replaced',
        by: member,
        at: now,
        text: `Device of ${sensor.name} replaced.`,
        after: { hungUpAt: since, serial, note },
      },
    )
    return { token: sensor.kind === 'logger' ? (await issueSensorToken({ sensorId }, by)).token : null }
  })
}

/** An offset that was entered for the time after it belongs to the new device already, and stays. */
async function beginWithoutOffset(sensor: Sensor, since: number, { member, clock }: { member: Actor; clock: Clock }): Promise<void> {
  const current = offsetAt(await SensorOffset.findAll({ where: { sensorId: sensor.id } }), since)
  if (!current || (current.airTempOffsetK === 0 && current.relHumidityOffsetPct === 0)) return
  const values = { ...NO_OFFSET, enteredBy: member.id, enteredAt: clock.now() }
  if (current.since === since) await current.update(values)
  else await SensorOffset.create({ ...values, id: newId(clock.now()), sensorId: sensor.id, since })
  await correctFrom(sensor, since)
}
