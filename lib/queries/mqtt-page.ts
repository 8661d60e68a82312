import { millisecondsInDay } from 'date-fns/constants'
import { QueryTypes } from 'sequelize'
import type { Clock } from '@/lib/core/clock'
import { brokerAddressText } from '@/lib/mqtt/broker-input'
import { statusTopic, type ConnectionState } from '@/lib/mqtt/connection-words'
import type { MessageOutcome } from '@/lib/mqtt/sort-messages'
import type { TopicInput } from '@/lib/mqtt/topic-input'
import { loadFoundry } from '@/lib/queries/load-foundry'
import { workerPulse } from '@/lib/queries/worker-pulse'
import { database, MqttBroker, MqttMessage, MqttTopic, Sensor } from '@/models'

export type MqttCounts = { messages: number; readings: number; refused: number; dropped: number }

export type MqttTopicRow = TopicInput & {
  id: string
  sensorName: string
  /** Nothing is listened to for a sensor that is retired. */
  isSensorRetired: boolean
  /** Demo data in a foundry that is not the demo itself. */
  isDemo: boolean
}

export type MqttMessageRow = {
  topic: string
  receivedAt: number
  text: string
  outcome: MessageOutcome
  reason: string
}

export type MqttPage = {
  now: number
  timeZone: string
  /** Null while none is set. Never the password. */
  broker: { address: string; userName: string; hasPassword: boolean; statusTopic: string } | null
  state: ConnectionState
  /** Of the last 24 hours and the hour begun. */
  counts: MqttCounts
  topics: MqttTopicRow[]
  /** Loggers in use. */
  sensors: { id: number; name: string }[]
  messages: MqttMessageRow[]
}

const SHOWN_MESSAGES = 60

/** How the connection to the broker stands, and how much came in the last day. */
export async function loadMqttState(now: number): Promise<{ broker: MqttBroker | null; state: ConnectionState; counts: MqttCounts }> {
  const [broker, { isAlive }, [counts]] = await Promise.all([
    MqttBroker.findByPk(1),
    workerPulse(now),
    database.query<MqttCounts>(
      `SELECT coalesce(sum(message_count), 0) AS messages, coalesce(sum(reading_count), 0) AS readings,
              coalesce(sum(refused_count), 0) AS refused, coalesce(sum(dropped_count), 0) AS dropped
         FROM mqtt_hours WHERE hour_start > :since`,
      { type: QueryTypes.SELECT, replacements: { since: now - millisecondsInDay } },
    ),
  ])
  return {
    broker,
    state: {
      isOn: broker?.isOn ?? false,
      connectedSince: broker?.connectedSince ?? null,
      awaySince: broker?.awaySince ?? null,
      trouble: broker?.trouble ?? '',
      isWorkerAlive: isAlive,
    },
    counts: counts ?? { messages: 0, readings: 0, refused: 0, dropped: 0 },
  }
}

/** Everything that the page of the broker shows. */
export async function loadMqttPage({ clock }: { clock: Clock }): Promise<MqttPage> {
  const now = clock.now()
  const [{ broker, state, counts }, foundry, topics, sensors, messages] = await Promise.all([
    loadMqttState(now),
    loadFoundry(),
    MqttTopic.findAll({ include: ['sensor'], order: ['filter', 'sensorId'] }),
    Sensor.findAll({ where: { kind: 'logger', retiredAt: null }, order: ['name'] }),
    MqttMessage.findAll({ order: [['receivedAt', 'DESC']], limit: SHOWN_MESSAGES }),
  ])
  return {
    now,
    timeZone: foundry.timeZone,
    broker: broker && {
      address: brokerAddressText(broker),
      userName: broker.userName,
      hasPassword: broker.sealedPassword !== null,
      statusTopic: statusTopic(broker.clientId),
    },
    state,
    counts,
    topics: topics.map((topic) => ({
      id: topic.id,
      filter: topic.filter,
      sensorId: topic.sensorId,
      tempPath: topic.tempPath,
      rhPath: topic.rhPath,
      pressurePath: topic.pressurePath,
      timePath: topic.timePath,
      batteryPath: topic.batteryPath,
      tempUnit: topic.tempUnit,
      timeForm: topic.timeForm,
      sensorName: topic.sensor?.name ?? '',
      isSensorRetired: topic.sensor?.retiredAt !== null,
      isDemo: topic.isDemo && !foundry.isDemo,
    })),
    sensors: sensors.map(({ id, name }) => ({ id, name })),
    messages: messages.map(({ topic, receivedAt, text, outcome, reason }) => ({
      topic,
      receivedAt,
      text,
      outcome,
      reason,
    })),
  }
}
