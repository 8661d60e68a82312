import { addFoundryEvent } from '@/lib/commands/foundry-event'
import { refuseField } from '@/lib/commands/refuse-field'
import { stopBeingDemo } from '@/lib/commands/stop-being-demo'
import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import { newId } from '@/lib/core/ids'
import type { Actor } from '@/lib/members/actor'
import { changedFields } from '@/lib/members/changed-fields'
import type { TopicInput } from '@/lib/mqtt/topic-input'
import { inTransaction, MqttTopic, Sensor } from '@/models'

type By = { member: Actor; clock: Clock }

/** Far more than a foundry has loggers, and each is subscribed to by itself. */
const MOST_TOPICS = 100

/** Adds a topic that feeds a sensor. @throws {AppError} conflict, with `fields` for a sensor that cannot be fed or is fed by it already. */
export function addMqttTopic(input: TopicInput, { member, clock }: By): Promise<{ topicId: string }> {
  return inTransaction(async () => {
    const now = clock.now()
    const sensor = await fedSensor(input, null)
    if ((await MqttTopic.count()) >= MOST_TOPICS)
      throw new AppError('conflict', `There are ${MOST_TOPICS} topics, and no more can be kept.`)
    const topicId = newId(now)
    await MqttTopic.create({ ...input, id: topicId, isDemo: member.isDemo ?? false, createdAt: now })
    await addFoundryEvent(
      { type: 'mqtt', id: topicId, name: input.filter },
      { kind: 'topic added', by: member, at: now, text: `MQTT topic ${input.filter} feeds ${sensor.name}.`, after: told(input, sensor) },
    )
    return { topicId }
  })
}

/** Changes a topic, or where its figures stand. @throws {AppError} not_found; conflict as for a new one. */
export function changeMqttTopic(topicId: string, input: TopicInput, { member, clock }: By): Promise<void> {
  return inTransaction(async () => {
    const topic = await knownTopic(topicId)
    const sensor = await fedSensor(input, topicId)
    const changed = changedFields(told(topic, topic.sensor), told(input, sensor))
    if (Object.keys(changed.after).length === 0) return
    await topic.update(input)
    await stopBeingDemo(topic, member)
    await addFoundryEvent(
      { type: 'mqtt', id: topicId, name: input.filter },
      { kind: 'topic changed', by: member, at: clock.now(), text: `MQTT topic ${input.filter} changed.`, ...changed },
    )
  })
}

/** Listens to a topic no more. What it has told stays. @throws {AppError} not_found. */
export function removeMqttTopic(topicId: string, { member, clock }: By): Promise<void> {
  return inTransaction(async () => {
    const topic = await knownTopic(topicId)
    await topic.destroy()
    await addFoundryEvent(
      { type: 'mqtt', id: topicId, name: topic.filter },
      {
        kind: 'topic removed',
        by: member,
        at: clock.now(),
        text: `MQTT topic ${topic.filter} removed.`,
        before: told(topic, topic.sensor),
      },
    )
  })
}

async function knownTopic(topicId: string): Promise<MqttTopic> {
  const topic = await MqttTopic.findByPk(topicId, { include: ['sensor'] })
  if (!topic) throw new AppError('not_found', 'This topic is not in the list any more.')
  return topic
}

async function fedSensor({ sensorId, filter }: TopicInput, ownId: string | null): Promise<Sensor> {
  const sensor = await Sensor.findByPk(sensorId)
  if (!sensor) refuseField('sensorId', 'There is no such sensor.')
  if (sensor.retiredAt !== null) refuseField('sensorId', `${sensor.name} is retired.`)
  if (sensor.kind !== 'logger') refuseField('sensorId', `${sensor.name} is read by people. Choose a logger.`)
  const same = await MqttTopic.findOne({ where: { filter, sensorId } })
  if (same && same.id !== ownId) refuseField('filter', `${filter} feeds ${sensor.name} already.`)
  return sensor
}

/** What the history tells of a topic. */
function told(topic: TopicInput, sensor: { name: string } | undefined) {
  const { filter, tempPath, rhPath, pressurePath, timePath, batteryPath, tempUnit, timeForm } = topic
  return { topic: filter, sensor: sensor?.name ?? '', tempPath, rhPath, pressurePath, timePath, batteryPath, tempUnit, timeForm }
}
