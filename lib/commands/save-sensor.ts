import { addFoundryEvent } from '@/lib/commands/foundry-event'
import { requireFreeName } from '@/lib/commands/require-free-name'
import { revokeSensorToken } from '@/lib/commands/revoke-sensor-token'
import { stopBeingDemo } from '@/lib/commands/stop-being-demo'
import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import { nameList } from '@/lib/format/name-list'
import type { Actor } from '@/lib/members/actor'
import { changedFields } from '@/lib/members/changed-fields'
import type { SensorInput, SensorRename } from '@/lib/room/sensor-input'
import { inTransaction, Place, Sensor, SensorToken } from '@/models'

type By = { member: Actor; clock: Clock }

/** Adds a sensor. @throws {AppError} conflict with `fields` for a name that is taken. */
export function createSensor(input: SensorInput, { member, clock }: By): Promise<{ sensorId: number }> {
  return inTransaction(async () => {
    const now = clock.now()
    requireFreeName(input.name, { among: await Sensor.findAll(), kind: 'sensor', ownId: null })
    const sensor = await Sensor.create({ ...input, isDemo: member.isDemo ?? false, createdAt: now })
    await addFoundryEvent(
      { type: 'sensor', id: String(sensor.id), name: input.name },
      { kind: 'sensor added', by: member, at: now, text: `Sensor ${input.name} added.`, after: input },
    )
    return { sensorId: sensor.id }
  })
}

/** Gives a sensor another name. @throws {AppError} not_found; conflict when it is retired, with `fields` for a name that is taken. */
export function renameSensor(sensorId: number, input: SensorRename, { member, clock }: By): Promise<void> {
  return inTransaction(async () => {
    const sensor = await sensorInUse(sensorId)
    requireFreeName(input.name, { among: await Sensor.findAll(), kind: 'sensor', ownId: sensorId })
    const changed = changedFields({ name: sensor.name }, input)
    if (Object.keys(changed.after).length === 0) return
    await sensor.update(input)
    await stopBeingDemo(sensor, member)
    await addFoundryEvent(
      { type: 'sensor', id: String(sensorId), name: input.name },
      { kind: 'sensor renamed', by: member, at: clock.now(), text: `Sensor ${input.name} renamed.`, ...changed },
    )
  })
}

/**
 * Retires a sensor and revokes its tokens. Its readings stay behind the coats that dried by them.
 *
 * @throws {AppError} not_found; conflict while a place in use is served by it, or when it is retired already.
 */
export function retireSensor(sensorId: number, { member, clock }: By): Promise<void> {
  return inTransaction(async () => {
    const now = clock.now()
    const sensor = await sensorInUse(sensorId)
    const places = await Place.findAll({ where: { sensorId, retiredAt: null }, order: [['name', 'ASC']] })
    if (places.length > 0) {
      throw new AppError(
        'conflict',
        `${sensor.name} reads the air of ${nameList(places.map(({ name }) => name))}. Give ${places.length === 1 ? 'it' : 'them'} another sensor first.`,
      )
    }
    for (const token of await SensorToken.findAll({ where: { sensorId, revokedAt: null } })) {
      await revokeSensorToken({ tokenId: token.id }, { member, clock: { now: () => now } })
    }
    await sensor.update({ retiredAt: now })
    await stopBeingDemo(sensor, member)
    await addFoundryEvent(
      { type: 'sensor', id: String(sensorId), name: sensor.name },
      { kind: 'sensor retired', by: member, at: now, text: `Sensor ${sensor.name} retired.` },
    )
  })
}

/** Takes a retired sensor into use again; it needs a new token. @throws {AppError} not_found. Without effect when it is in use. */
export function reuseSensor(sensorId: number, { member, clock }: By): Promise<void> {
  return inTransaction(async () => {
    const sensor = await Sensor.findByPk(sensorId)
    if (!sensor) throw new AppError('not_found', 'There is no such sensor.')
    if (sensor.retiredAt === null) return
    await sensor.update({ retiredAt: null })
    await stopBeingDemo(sensor, member)
    await addFoundryEvent(
      { type: 'sensor', id: String(sensorId), name: sensor.name },
      { kind: 'sensor in use again', by: member, at: clock.now(), text: `Sensor ${sensor.name} taken into use again.` },
    )
  })
}

async function sensorInUse(sensorId: number): Promise<Sensor> {
  const sensor = await Sensor.findByPk(sensorId)
  if (!sensor) throw new AppError('not_found', 'There is no such sensor.')
  if (sensor.retiredAt !== null) throw new AppError('conflict', `${sensor.name} is retired.`)
  return sensor
}
