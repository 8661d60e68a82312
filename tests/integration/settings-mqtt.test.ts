import { beforeAll, describe, expect, it } from 'vitest'
import { saveMqttBroker } from '@/lib/commands/save-mqtt-broker'
import { addMqttTopic, changeMqttTopic, removeMqttTopic } from '@/lib/commands/save-mqtt-topic'
import { createSensor, retireSensor } from '@/lib/commands/save-sensor'
import { MOST_MESSAGES, takeMqttMessages } from '@/lib/commands/take-mqtt-messages'
import type { Actor } from '@/lib/members/actor'
import type { BrokerInput } from '@/lib/mqtt/broker-input'
import type { SortedMessage } from '@/lib/mqtt/sort-messages'
import type { TopicInput } from '@/lib/mqtt/topic-input'
import { loadMqttPage } from '@/lib/queries/mqtt-page'
import { loadMqttPlan } from '@/lib/queries/mqtt-plan'
import { sealText } from '@/lib/server/sealed-text'
import { FoundryEvent, MqttBroker, MqttHour, MqttMessage, Reading } from '@/models'
import { fieldRefusal, historyOf, kindsOf, openSettings } from '@/tests/factories/settings'
import { HOUR, MINUTE, NOW, stoppedClock, type TestFoundry } from '@/tests/factories/shell-room'

const PASSWORD = 'brass-bell-in-fog'
const clock = stoppedClock()
let foundry: TestFoundry
let ines: Actor
const by = () => ({ member: ines, clock })

const brokerOf = (overrides: Partial<BrokerInput> = {}): BrokerInput => ({
  isOn: true,
  address: { isTls: false, host: 'shop', port: 1883 },
  userName: 'kiln',
  password: '',
  ...overrides,
})
const topicOf = (overrides: Partial<TopicInput> = {}): TopicInput => ({
  filter: 'shop/air',
  sensorId: foundry.sensorId,
  tempPath: 't',
  rhPath: 'rh',
  pressurePath: null,
  timePath: null,
  batteryPath: null,
  tempUnit: 'degC',
  timeForm: 'arrival',
  ...overrides,
})

beforeAll(async () => {
  ;({ foundry, ines } = await openSettings())
})

describe('the broker', () => {
  it('keeps its password sealed, and tells it to the worker alone', async () => {
    expect(await loadMqttPlan()).toBeNull()
    await saveMqttBroker(brokerOf({ password: PASSWORD }), by())
    expect(await loadMqttPlan()).toMatchObject({ password: PASSWORD, isPasswordLost: false, userName: 'kiln' })
    const broker = await MqttBroker.findByPk(1, { rejectOnEmpty: true })
    expect(broker.clientId).toMatch(/^[a-z0-9]{1,23}$/)
    // The same word is never sealed in the same way.
    expect(broker.sealedPassword).not.toBe(sealText(PASSWORD, 'mqtt password'))
    for (const text of [broker.get({ plain: true }), await loadMqttPage({ clock }), await FoundryEvent.findAll()].map((each) =>
      JSON.stringify(each),
    )) {
      expect(text).not.toContain(PASSWORD)
    }
    for (const text of [await loadMqttPage({ clock }), await historyOf('mqtt')].map((each) => JSON.stringify(each))) {
      expect(text).not.toContain(broker.sealedPassword)
    }
  })

  it('keeps the password while none is typed, and sends it nowhere else', async () => {
    await saveMqttBroker(brokerOf({ isOn: false }), by())
    await saveMqttBroker(brokerOf(), by())
    expect(await loadMqttPlan()).toMatchObject({ isOn: true, password: PASSWORD })
    const elsewhere = { isTls: false, host: 'elsewhere', port: 1883 }
    await expect(saveMqttBroker(brokerOf({ address: elsewhere }), by())).rejects.toMatchObject(fieldRefusal('password', /again/))
    await expect(saveMqttBroker(brokerOf({ userName: 'other' }), by())).rejects.toMatchObject(fieldRefusal('password', /again/))
    await saveMqttBroker(brokerOf({ address: elsewhere, userName: '' }), by())
    expect(await loadMqttPlan()).toMatchObject({ password: null, isPasswordLost: false, userName: '' })
    await saveMqttBroker(brokerOf({ address: elsewhere, password: PASSWORD }), by())
    const lines = await historyOf('mqtt')
    expect(lines.map(({ detail }) => detail)).toMatchObject([
      { text: 'The MQTT broker was set, with a new password.', after: { address: 'mqtt://shop:1883', userName: 'kiln' } },
      { before: { isOn: true }, after: { isOn: false } },
      { before: { isOn: false }, after: { isOn: true } },
      { after: { address: 'mqtt://elsewhere:1883', userName: '' } },
      { text: 'The MQTT broker was changed, with a new password.' },
    ])
  })

  it('with a password of another NEXTAUTH_SECRET says that it is lost', async () => {
    const sealed = Buffer.from(sealText(PASSWORD, 'mqtt password'), 'base64url')
    sealed[sealed.length - 1]! ^= 1
    await MqttBroker.update({ sealedPassword: sealed.toString('base64url') }, { where: { id: 1 } })
    expect(await loadMqttPlan()).toMatchObject({ password: null, isPasswordLost: true })
    await MqttBroker.update({ sealedPassword: 'x' }, { where: { id: 1 } })
    expect(await loadMqttPlan()).toMatchObject({ password: null, isPasswordLost: true })
  })
})

describe('a topic', () => {
  it('is added, changed and removed, with a line of history for each', async () => {
    const { topicId } = await addMqttTopic(topicOf(), by())
    await changeMqttTopic(topicId, topicOf(), by())
    await changeMqttTopic(topicId, topicOf({ tempPath: 'temp' }), by())
    await removeMqttTopic(topicId, by())
    await expect(removeMqttTopic(topicId, by())).rejects.toMatchObject({ code: 'not_found' })
    expect(await kindsOf('mqtt', topicId)).toEqual(['topic added', 'topic changed', 'topic removed'])
    expect((await historyOf('mqtt', topicId))[1]?.detail).toMatchObject({ before: { tempPath: 't' }, after: { tempPath: 'temp' } })
  })

  it('feeds a logger in use, once', async () => {
    const { sensorId: wall } = await createSensor({ name: 'By the door', kind: 'wall hygrometer' }, by())
    const { sensorId: loft } = await createSensor({ name: 'Loft', kind: 'logger' }, by())
    await expect(addMqttTopic(topicOf({ sensorId: wall }), by())).rejects.toMatchObject(fieldRefusal('sensorId', /read by people/))
    await expect(addMqttTopic(topicOf({ sensorId: 999 }), by())).rejects.toMatchObject(fieldRefusal('sensorId', /no such sensor/))
    await addMqttTopic(topicOf({ sensorId: loft }), by())
    await addMqttTopic(topicOf(), by())
    await expect(addMqttTopic(topicOf(), by())).rejects.toMatchObject(fieldRefusal('filter', /already/))
    expect((await loadMqttPlan())?.rules.map(({ sensorName }) => sensorName)).toEqual(['Shell room', 'Loft'])
    await retireSensor(loft, by())
    expect((await loadMqttPlan())?.rules.map(({ sensorName }) => sensorName)).toEqual(['Shell room'])
    await expect(addMqttTopic(topicOf({ sensorId: loft, filter: 'x' }), by())).rejects.toMatchObject(fieldRefusal('sensorId', /retired/))
    // What comes in the moment of its retirement breaks nothing.
    await takeMqttMessages({ messages: [message({ sensorId: loft, topic: 'late' })], dropped: 0 }, { clock })
    expect(await Reading.count({ where: { sensorId: loft } })).toBe(0)
  })
})

let sent = 0
function message({ sensorId = foundry.sensorId, topic = 'shop/air' } = {}): SortedMessage {
  const measuredAt = NOW + MINUTE + (sent += 1)
  return {
    arrival: {
      topic,
      text: 'é'.repeat(900),
      sizeBytes: 1800,
      sha256: 'a'.repeat(64),
      arrivedAt: NOW + sent,
      isRetained: false,
      isHeldBack: false,
      isSentAgain: false,
    },
    outcome: 'taken',
    reason: '',
    rows: [{ sensorId, row: { measuredAt, airTempC: 20, relHumidityPct: 50 } }],
    batteries: [],
  }
}

describe('what is kept of the messages', () => {
  it('is bounded: in length, in topics and in hours', async () => {
    await MqttMessage.destroy({ where: {} })
    await MqttHour.destroy({ where: {} })
    const messages = Array.from({ length: MOST_MESSAGES + 20 }, (_, index) => message({ topic: `t/${index}` }))
    await takeMqttMessages({ messages, dropped: 3 }, { clock })
    expect(await MqttMessage.count()).toBe(MOST_MESSAGES)
    expect(await MqttMessage.findByPk('t/0')).toBeNull()
    expect((await MqttMessage.findByPk('t/219'))?.text).toHaveLength(500)
    expect((await loadMqttPage({ clock })).counts).toEqual({ messages: 223, readings: 220, refused: 0, dropped: 3 })
    clock.advance(26 * HOUR)
    await takeMqttMessages({ messages: [], dropped: 1 }, { clock })
    expect(await MqttHour.count()).toBe(1)
    expect((await loadMqttPage({ clock })).counts).toEqual({ messages: 1, readings: 0, refused: 0, dropped: 1 })
  })
})
