import { addFoundryEvent } from '@/lib/commands/foundry-event'
import { refuseField } from '@/lib/commands/refuse-field'
import { stopBeingDemo } from '@/lib/commands/stop-being-demo'
import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import { newId } from '@/lib/core/ids'
import type { Actor } from '@/lib/members/actor'
import { changedFields } from '@/lib/members/changed-fields'
import type { OffsetInput } from '@/lib/room/sensor-forms'
import { inTransaction, Sensor, SensorOffset } from '@/models'

type By = { member: Actor; clock: Clock }

/**
 * Sets what is added to a sensor's readings from an instant on, in place of what was entered for that instant before. Readings that come
 * are corrected at once; those that are there by the job that follows `correctFrom`.
 *
 * @throws {AppError} not_found; conflict for a retired sensor, with `fields` for a time ahead of the clock.
 */
export function saveSensorOffset(sensorId: number, input: OffsetInput, { member, clock }: By): Promise<void> {
  return inTransaction(async () => {
    const now = clock.now()
    const sensor = await Sensor.findByPk(sensorId)
    if (!sensor) throw new AppError('not_found', 'There is no such sensor.')
    if (sensor.retiredAt !== null) throw new AppError('conflict', `${sensor.name} is retired.`)
    const { since = now, ...offset } = input
    if (since > now) refuseField('since', 'This time lies ahead of the clock.')
    const former = await SensorOffset.findOne({ where: { sensorId, since } })
    const before = former && offsetFields(former)
    const values = { ...offset, enteredBy: member.id, enteredAt: now }
    if (former) await former.update(values)
    else await SensorOffset.create({ ...values, id: newId(now), sensorId, since })
    await correctFrom(sensor, since)
    await stopBeingDemo(sensor, member)
    await addFoundryEvent(
      { type: 'sensor', id: String(sensorId), name: sensor.name },
      {
        kind: 'offset entered',
        by: member,
        at: now,
        text: `Offset of ${sensor.name} entered.`,
        ...changedFields(before ?? {}, offsetFields({ ...offset, since })),
      },
    )
  })
}

/** Takes an offset away, as if it had not been entered: the one before it counts on. @throws {AppError} not_found. */
export function removeSensorOffset(offsetId: string, { member, clock }: By): Promise<void> {
  return inTransaction(async () => {
    const offset = await SensorOffset.findByPk(offsetId)
    if (!offset) throw new AppError('not_found', 'There is no such offset.')
    const sensor = await Sensor.findByPk(offset.sensorId, { rejectOnEmpty: true })
    await offset.destroy()
    await correctFrom(sensor, offset.since)
    await stopBeingDemo(sensor, member)
    await addFoundryEvent(
      { type: 'sensor', id: String(sensor.id), name: sensor.name },
      {
        kind: 'offset taken away',
        by: member,
        at: clock.now(),
        text: `Offset of ${sensor.name} taken away.`,
        before: offsetFields(offset),
      },
    )
  })
}

/** Readings from `since` on are to be brought to the offsets. Takes part in the caller's transaction. */
export async function correctFrom(sensor: Sensor, since: number): Promise<void> {
  await sensor.update({ correctFrom: Math.min(sensor.correctFrom ?? since, since) })
}

const offsetFields = ({
  since,
  airTempOffsetK,
  relHumidityOffsetPct,
  note,
}: Pick<SensorOffset, 'since' | 'airTempOffsetK' | 'relHumidityOffsetPct' | 'note'>) => ({
  countsFromAt: since,
  airTempOffsetK,
  relHumidityOffsetPct,
  note,
})
