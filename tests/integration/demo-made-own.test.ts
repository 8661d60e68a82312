import { beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { issueSensorToken } from '@/lib/commands/issue-sensor-token'
import { logDips } from '@/lib/commands/log-dips'
import { changeBath, retireBath, reuseBath } from '@/lib/commands/save-bath'
import { addMqttTopic } from '@/lib/commands/save-mqtt-topic'
import { changePlace, retirePlace, reusePlace } from '@/lib/commands/save-place'
import { renameSensor, retireSensor, reuseSensor } from '@/lib/commands/save-sensor'
import { createTree } from '@/lib/commands/save-tree'
import { openShop, type DemoShop } from '@/lib/demo/open-shop'
import { DEMO_PEOPLE } from '@/lib/demo/people'
import { removeDemo } from '@/lib/demo/remove-demo'
import type { Actor } from '@/lib/members/actor'
import type { TopicInput } from '@/lib/mqtt/topic-input'
import { loadRecipeDetail } from '@/lib/queries/recipe-detail'
import { loadRecipeList } from '@/lib/queries/recipe-list'
import { loadRoomPage } from '@/lib/queries/room'
import { sensorOfToken } from '@/lib/queries/sensor-of-token'
import { loadTreeDetail } from '@/lib/queries/tree-detail'
import { loadWorkDetail } from '@/lib/queries/work-detail'
import { loadWorkList } from '@/lib/queries/work-list'
import { treeInput } from '@/lib/trees/tree-input'
import { Bath, Foundry, FoundryEvent, inTransaction, MqttTopic, Place, Recipe, RecipeVersion, Sensor } from '@/models'
import { buildAir, buildFoundry, buildMember, dipBody, HOUR, NOW, stoppedClock, type TestFoundry } from '@/tests/factories/shell-room'

const clock = stoppedClock()
let foundry: TestFoundry
let owner: Actor
let shop: DemoShop
const by = () => ({ member: owner, clock })

beforeAll(async () => {
  foundry = await buildFoundry()
  owner = await buildMember('owner')
})

// Every test takes the demo away again; what it made the foundry's own stays, and the next demo is named beside it.
beforeEach(async () => {
  const passwordHashes = new Map(DEMO_PEOPLE.map(({ key }) => [key, 'scrypt$1024$8$1$AAAA$AAAA'] as const))
  shop = await inTransaction(() => openShop({ createdAt: NOW, passwordHashes, disabledAt: NOW }))
})

const air = (sensorId: number) => ({
  name: 'Own rack',
  airSpeedFansOnMps: 2,
  airSpeedFansOffMps: 0.2,
  fanDuty: 1,
  airMeasuredOn: null,
  airMeasuredWith: null,
  airMeasuredBy: null,
  sensorId,
  fans: [],
})
const isThere = async (model: 'place' | 'bath' | 'sensor', id: string | number) => {
  const row = model === 'place' ? await Place.findByPk(id) : model === 'bath' ? await Bath.findByPk(id) : await Sensor.findByPk(id)
  return row !== null && !row.isDemo
}

describe('what somebody of the foundry changed of the demo stays when it goes', () => {
  it('a place, with its sensor', async () => {
    await changePlace(shop.placeIds.boatShed, air(shop.wallSensorId), 'now', by())
    await retirePlace(shop.placeIds.longRack, by())
    await Place.update({ retiredAt: NOW }, { where: { id: shop.placeIds.netLoft } })
    await reusePlace(shop.placeIds.netLoft, by())
    await removeDemo(by())
    for (const key of ['boatShed', 'longRack', 'netLoft'] as const) {
      expect([key, await isThere('place', shop.placeIds[key])]).toEqual([key, true])
    }
    expect(await Place.findByPk(shop.placeIds.boatShed)).toMatchObject({ name: 'Own rack', airSpeedFansOnMps: 2 })
    expect(await isThere('sensor', shop.wallSensorId)).toBe(true)
    expect(await Place.findByPk(shop.placeIds.stillCorner)).toBeNull()
  })

  it.each([
    ['changed', (id: string) => changeBath(id, { name: 'Own slurry', kind: 'backup' }, by())],
    ['retired', (id: string) => retireBath(id, by())],
    ['taken into use again', (id: string) => Bath.update({ retiredAt: NOW }, { where: { id } }).then(() => reuseBath(id, by()))],
  ])('a bath that was %s', async (_, act) => {
    await Recipe.update({ retiredAt: NOW }, { where: { isDemo: true } })
    await act(shop.bathIds.backup)
    await removeDemo(by())
    expect(await isThere('bath', shop.bathIds.backup)).toBe(true)
    expect(await Bath.findByPk(shop.bathIds.face)).toBeNull()
  })

  it.each([
    ['renamed', (id: number) => renameSensor(id, { name: 'Own logger' }, by())],
    ['retired', (id: number) => retireSensor(id, by())],
    ['taken into use again', (id: number) => Sensor.update({ retiredAt: NOW }, { where: { id } }).then(() => reuseSensor(id, by()))],
  ])('a sensor that was %s', async (_, act) => {
    const sensorId = shop.sensorIds['net loft']
    await Place.update({ sensorId: shop.wallSensorId }, { where: { sensorId } })
    await act(sensorId)
    await removeDemo(by())
    expect(await isThere('sensor', sensorId)).toBe(true)
    expect(await Sensor.findByPk(shop.sensorIds['shell room'])).toBeNull()
  })

  it('but not what one of its own people changed', async () => {
    const ines = shop.people.get('ines')!
    await renameSensor(shop.wallSensorId, { name: 'Wall dial' }, { member: ines, clock })
    await removeDemo(by())
    expect(await Sensor.findByPk(shop.wallSensorId)).toBeNull()
  })
})

describe('topics of a broker, when the demo goes', () => {
  it('go with the sensor they feed, unless somebody of the foundry made one', async () => {
    const topic = (sensorId: number): TopicInput => ({
      filter: 'shop/air',
      sensorId,
      tempPath: 't',
      rhPath: 'rh',
      pressurePath: null,
      timePath: null,
      batteryPath: null,
      tempUnit: 'degC',
      timeForm: 'arrival',
    })
    const ines = { ...shop.people.get('ines')!, isDemo: true }
    await addMqttTopic(topic(shop.sensorIds['shell room']), { member: ines, clock })
    const { topicId } = await addMqttTopic(topic(shop.sensorIds['net loft']), by())
    await removeDemo(by())
    expect((await MqttTopic.findAll()).map(({ id }) => id)).toEqual([topicId])
    expect(await isThere('sensor', shop.sensorIds['net loft'])).toBe(true)
    expect(await Sensor.findByPk(shop.sensorIds['shell room'])).toBeNull()
  })
})

describe('tokens, when the demo goes', () => {
  it('of its sensors go with their lines of history; one of the foundry’s own sensor stays, whoever made it', async () => {
    const kilnward = { member: null, clock }
    const fed = await issueSensorToken({ sensorId: shop.sensorIds['shell room'] }, kilnward)
    const own = await issueSensorToken({ sensorId: foundry.sensorId }, kilnward)
    // Its sensor stays, and must not be fed any more.
    const stays = await issueSensorToken({ sensorId: shop.sensorIds['net loft'] }, kilnward)
    await Place.update({ isDemo: false }, { where: { id: shop.placeIds.netLoft } })
    await removeDemo(by())
    expect(await isThere('sensor', shop.sensorIds['net loft'])).toBe(true)
    expect(await sensorOfToken(fed.token)).toBeNull()
    expect(await sensorOfToken(stays.token)).toBeNull()
    for (const { token } of shop.sensorTokens) expect(await sensorOfToken(token)).toBeNull()
    expect(await sensorOfToken(own.token)).toMatchObject({ sensorId: foundry.sensorId })
    const lines = await FoundryEvent.findAll({ where: { kind: 'token issued' } })
    expect(lines.map(({ subjectId }) => subjectId)).toEqual([String(foundry.sensorId)])
  })
})

describe('the mark of the demo', () => {
  it('stands on its recipes, works and the room’s coats, but not where the whole foundry is the demo', async () => {
    await buildAir(foundry.sensorId, NOW - 4 * HOUR, NOW + 12 * HOUR)
    const recipeVersionId = shop.recipeVersionIds.six
    const ines = shop.people.get('ines')!
    const form = treeInput.parse({
      tag: 'T-700',
      recipeVersionId,
      placeId: foundry.placeId,
      pieces: [{ workTitle: 'Gate Post', sectionName: '', editionNumber: '1', isRecast: false }],
      waxMassKg: '2',
      cupKind: 'wax',
      cupVolumeL: '0.3',
      recessClass: 'none',
      spacing: 'open',
      hungMassKg: '',
      pourDate: '',
    })
    const tree = { id: (await createTree(form, { member: ines, clock })).treeId, tag: form.tag }
    const detail = (await loadTreeDetail({ tag: tree.tag, viewer: owner, clock }))!
    // The tree's page links to both.
    const workId = detail.pieces[0]!.workId
    const recipeId = detail.recipe.id
    expect(recipeId).toBe((await RecipeVersion.findByPk(recipeVersionId))!.recipeId)
    const dip = (coatNumber: number, dippedAt: number) =>
      logDips(dipBody(foundry, [{ treeId: tree.id, coatNumber, reason: 'In a test.' }], { dippedAt, bathId: shop.bathIds.face }), {
        member: owner,
        clock: stoppedClock(dippedAt),
      })
    await dip(1, NOW)
    await dip(2, NOW + 8 * HOUR)
    const marks = async () => {
      const room = await loadRoomPage({ sensorId: foundry.sensorId, range: '48h', tempUnit: 'degC', clock: stoppedClock(NOW + 9 * HOUR) })
      return [
        (await loadRecipeList()).find(({ id }) => id === recipeId)?.isDemo,
        (await loadRecipeDetail(recipeId))?.isDemo,
        (await loadWorkList({ query: '', page: 1, size: 50 })).rows.find(({ id }) => id === workId)?.isDemo,
        (await loadWorkDetail({ workId, clock }))?.isDemo,
        room.rows.find((row) => row.tree.tag === tree.tag)?.tree.isDemo,
        room.dried.coats.find((coat) => coat.tag === tree.tag)?.isDemo,
      ]
    }
    expect(await marks()).toEqual([true, true, true, true, true, true])
    await Foundry.update({ isDemo: true }, { where: { id: 1 } })
    expect(await marks()).toEqual([false, false, false, false, false, false])
  })
})
