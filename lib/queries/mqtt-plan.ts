import { QueryTypes } from 'sequelize'
import type { BrokerAddress } from '@/lib/mqtt/broker-input'
import type { TopicRule } from '@/lib/mqtt/sort-messages'
import { BROKER_PASSWORD, openSealedText } from '@/lib/server/sealed-text'
import { database, MqttBroker, MqttMessage } from '@/models'

/** What the worker needs to listen to the broker. */
export type MqttPlan = {
  isOn: boolean
  address: BrokerAddress
  clientId: string
  userName: string
  /** Null: none is stored. */
  password: string | null
  /** A stored one that cannot be opened with this NEXTAUTH_SECRET. */
  isPasswordLost: boolean
  rules: TopicRule[]
  heldFilters: string[]
  awaySince: number | null
}

/** The broker with the topics that feed sensors in use; null where none is set. The password is open: not for a page. */
export async function loadMqttPlan(): Promise<MqttPlan | null> {
  const [broker, rules] = await Promise.all([
    MqttBroker.findByPk(1),
    database.query<TopicRule>(
      `SELECT t.filter, t.sensor_id AS sensorId, s.name AS sensorName, t.temp_path AS tempPath, t.rh_path AS rhPath, t.pressure_path AS pressurePath,
              t.time_path AS timePath, t.battery_path AS batteryPath, t.temp_unit AS tempUnit, t.time_form AS timeForm
         FROM mqtt_topics t JOIN sensors s ON s.id = t.sensor_id WHERE s.retired_at IS NULL ORDER BY t.filter, t.sensor_id`,
      { type: QueryTypes.SELECT },
    ),
  ])
  if (!broker) return null
  const { isOn, isTls, host, port, clientId, userName, sealedPassword, heldFilters, awaySince } = broker
  const password = sealedPassword === null ? null : openSealedText(sealedPassword, BROKER_PASSWORD)
  return {
    isOn,
    address: { isTls, host, port },
    clientId,
    userName,
    password,
    isPasswordLost: sealedPassword !== null && password === null,
    rules,
    heldFilters,
    awaySince,
  }
}

/** The last message on each topic as it can be known again. */
export async function loadLastMqttMessages(): Promise<{ topic: string; sha256: string; arrivedAt: number }[]> {
  const messages = await MqttMessage.findAll({ attributes: ['topic', 'sha256', 'receivedAt'] })
  return messages.map(({ topic, sha256, receivedAt }) => ({ topic, sha256, arrivedAt: receivedAt }))
}
