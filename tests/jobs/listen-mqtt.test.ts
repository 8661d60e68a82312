import { afterAll, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest'
import { listenMqtt } from '@/jobs/listen-mqtt'
import { saveMqttBroker } from '@/lib/commands/save-mqtt-broker'
import { addMqttTopic, changeMqttTopic, removeMqttTopic } from '@/lib/commands/save-mqtt-topic'
import { createSensor } from '@/lib/commands/save-sensor'
import type { Actor } from '@/lib/members/actor'
import type { TopicInput } from '@/lib/mqtt/topic-input'
import { loadMqttPage } from '@/lib/queries/mqtt-page'
import { inTransaction, MqttBroker, MqttMessage, Reading, Sensor } from '@/models'
import { openSettings } from '@/tests/factories/settings'
import { startBroker, type TestBroker } from '@/tests/setup/mqtt-broker'

const PASSWORD = 'brass-bell-in-fog'
const clock = { now: () => Date.now() }
const LISTEN = { clock, lookEveryMs: 40, gatherMs: 20, firstWaitMs: 40, mostWaiting: 300 }

let broker: TestBroker
let ines: Actor
let sensorId: number
let clientId: string
let stop: () => Promise<void>
const by = () => ({ member: ines, clock })

const topicOf = (overrides: Partial<TopicInput> = {}): TopicInput => ({
  filter: 'shop/loft/air',
  sensorId,
  tempPath: 'data.temp',
  rhPath: 'data.rh',
  pressurePath: null,
  timePath: 'at',
  batteryPath: null,
  tempUnit: 'degC',
  timeForm: 'epoch s',
  ...overrides,
})
const setBroker = (overrides: { isOn?: boolean; password?: string } = {}) =>
  saveMqttBroker(
    { isOn: true, address: { isTls: false, host: '127.0.0.1', port: broker.port }, userName: 'kiln', password: PASSWORD, ...overrides },
    by(),
  )
const readings = async () => (await Reading.findAll({ where: { sensorId }, order: ['measuredAt'] })).map(({ airTempC }) => airTempC)
const messageOn = (topic: string) => MqttMessage.findByPk(topic)
const state = async () => (await loadMqttPage({ clock })).state

/** Long for a machine that does other things too; usually it takes some ten milliseconds. */
const until = (check: () => unknown) => vi.waitFor(check, { timeout: 20_000, interval: 20 })

let second = Math.floor(Date.now() / 1000) - 3600
/** A message of a moment of its own in the last hour. */
const air = (temp: number, at = (second += 60)) => JSON.stringify({ at, data: { temp, rh: 50 } })

beforeAll(async () => {
  ;({ ines } = await openSettings())
  ;({ sensorId } = await createSensor({ name: 'Loft', kind: 'logger' }, by()))
  broker = await startBroker({ userName: 'kiln', password: PASSWORD })
  await setBroker()
  clientId = (await MqttBroker.findByPk(1, { rejectOnEmpty: true })).clientId
  await addMqttTopic(topicOf(), by())
  stop = listenMqtt(LISTEN)
  await until(() => expect(broker.filtersOf(clientId)).toEqual(['shop/loft/air']))
})
afterAll(async () => {
  await stop()
  await broker.stop()
})
beforeEach(() => Reading.destroy({ where: { sensorId } }))

describe('the worker at a broker', () => {
  it('takes a reading, and says that it is there', async () => {
    await broker.publish('shop/loft/air', air(21.5))
    await until(async () => expect(await readings()).toEqual([21.5]))
    expect(broker.told.get(`kilnward/${clientId}/status`)).toEqual(['online'])
    expect(await messageOn('shop/loft/air')).toMatchObject({ outcome: 'taken', reason: '' })
    const page = await loadMqttPage({ clock })
    expect(page.state).toMatchObject({ isOn: true, connectedSince: expect.any(Number), trouble: '' })
    expect(page.counts).toMatchObject({ messages: 1, readings: 1, refused: 0, dropped: 0 })
    expect(JSON.stringify(page)).not.toContain(PASSWORD)
  })

  it('knows a reading that comes twice', async () => {
    const message = air(22)
    await broker.publish('shop/loft/air', message)
    await broker.publish('shop/loft/air', message)
    await until(async () => expect(await readings()).toEqual([22]))
    await broker.publish('shop/loft/air', message)
    await until(async () => expect((await messageOn('shop/loft/air'))?.outcome).toBe('repeated'))
    expect(await readings()).toEqual([22])
  })

  it('says why a message gave no reading, and with what it has', async () => {
    await broker.publish('shop/loft/air', '{"at":1,"data":{"temperature":21,"rh":50}}')
    await until(async () =>
      expect(await messageOn('shop/loft/air')).toMatchObject({
        outcome: 'refused',
        reason: 'There is no temperature at data.temp. It has at, data.temperature, data.rh.',
      }),
    )
    expect(await readings()).toEqual([])
  })

  it('tells of its going, comes back by itself, and gets what came meanwhile', async () => {
    await broker.goAway()
    await until(async () =>
      expect(await state()).toMatchObject({ connectedSince: null, trouble: expect.stringMatching(/No broker answers/) }),
    )
    expect(broker.told.get(`kilnward/${clientId}/status`)?.at(-1)).toBe('offline')
    await broker.publish('shop/loft/air', air(19))
    await broker.publish('shop/loft/air', air(19.5))
    await broker.comeBack()
    await until(async () => expect(await readings()).toEqual([19, 19.5]))
    await until(async () => expect(await state()).toMatchObject({ connectedSince: expect.any(Number), awaySince: null, trouble: '' }))
    expect(broker.told.get(`kilnward/${clientId}/status`)?.at(-1)).toBe('online')
  })

  it('follows the topics as they change, with battery and barometer', async () => {
    const { topicId } = await addMqttTopic(
      topicOf({ filter: 'cellar/+/air', pressurePath: 'hpa', batteryPath: 'bat', timePath: null, timeForm: 'arrival' }),
      by(),
    )
    await until(() => expect(broker.filtersOf(clientId)).toEqual(['cellar/+/air', 'shop/loft/air']))
    const message = '{"data":{"temp":17.5,"rh":61},"hpa":1002,"bat":81}'
    await broker.publish('cellar/a/air', message)
    await until(async () => expect(await readings()).toEqual([17.5]))
    expect(await Reading.findOne({ where: { sensorId } })).toMatchObject({ pressurePa: 100_200 })
    expect(await Sensor.findByPk(sensorId)).toMatchObject({ batteryPct: 81, batteryAt: expect.any(Number) })
    // The same words again, at once: no second reading, though the message tells no time.
    await broker.publish('cellar/a/air', message)
    await until(async () => expect((await messageOn('cellar/a/air'))?.outcome).toBe('repeated'))
    expect(await readings()).toEqual([17.5])

    await changeMqttTopic(topicId, topicOf({ filter: 'kitchen/air' }), by())
    await until(async () => expect((await state()).trouble).toBe('The broker does not let Kilnward listen to kitchen/air.'))
    expect(broker.filtersOf(clientId)).toEqual(['shop/loft/air'])
    await removeMqttTopic(topicId, by())
    await until(async () => expect((await state()).trouble).toBe(''))
  })

  it('passes over what the broker has kept and nobody knows the age of', async () => {
    await broker.publish('porch/air', '{"data":{"temp":9,"rh":80}}', { retain: true })
    const { topicId } = await addMqttTopic(topicOf({ filter: 'porch/air', timePath: null, timeForm: 'arrival' }), by())
    await until(async () => expect((await messageOn('porch/air'))?.outcome).toBe('passed over'))
    expect(await readings()).toEqual([])
    await removeMqttTopic(topicId, by())
    await until(() => expect(broker.filtersOf(clientId)).toEqual(['shop/loft/air']))
  })

  it('in a flood keeps what it can, and says how much it dropped', async () => {
    const before = (await loadMqttPage({ clock })).counts
    const count = 800
    // Nobody can write meanwhile, so all of it has to wait.
    await inTransaction(async () => {
      await Promise.all(Array.from({ length: count }, (_, index) => broker.publish('shop/loft/air', air(20 + (index % 7), (second += 1)))))
      await new Promise((resolve) => setTimeout(resolve, 300))
    })
    await until(async () => {
      const { counts } = await loadMqttPage({ clock })
      expect(counts.messages - before.messages).toBe(count)
      expect(counts.dropped).toBeGreaterThan(100)
      expect(counts.readings - before.readings).toBe(count - counts.dropped)
    })
    expect(await readings()).toHaveLength(count - (await loadMqttPage({ clock })).counts.dropped)
  })

  it('with a wrong password says so, and lets go when it is switched off', async () => {
    await setBroker({ password: 'not-this-one' })
    await until(async () => expect((await state()).trouble).toBe('The broker refuses the user name or the password.'))
    await setBroker()
    await until(async () => expect((await state()).connectedSince).not.toBeNull())
    await until(() => expect(broker.filtersOf(clientId)).toEqual(['shop/loft/air']))
    await setBroker({ isOn: false, password: '' })
    await until(() => expect(broker.isConnected(clientId)).toBe(false))
    // Nothing is kept for one that does not listen any more.
    expect(broker.filtersOf(clientId)).toEqual([])
    expect(broker.told.get(`kilnward/${clientId}/status`)?.at(-1)).toBe('offline')
    await until(async () => expect(await state()).toMatchObject({ isOn: false, connectedSince: null, awaySince: null, trouble: '' }))
    expect(await MqttMessage.count()).toBe(3)
  })
})
