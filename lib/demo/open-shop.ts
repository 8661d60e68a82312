import { issueSensorToken } from '@/lib/commands/issue-sensor-token'
import type { Clock } from '@/lib/core/clock'
import { newId } from '@/lib/core/ids'
import type { DemoAir } from '@/lib/demo/climate'
import { DEMO_PEOPLE, type DemoPersonKey } from '@/lib/demo/people'
import {
  DEMO_ALTITUDE_M,
  DEMO_BATH_NAMES,
  DEMO_LOGGERS,
  DEMO_NAME,
  DEMO_PLACE_KEYS,
  DEMO_PLACES,
  DEMO_RECIPES,
  DEMO_CALENDAR,
  DEMO_TIME_ZONE,
  DEMO_WALL_HYGROMETER,
  type DemoBath,
  type DemoPlace,
  type DemoRecipe,
} from '@/lib/demo/shop'
import type { Actor } from '@/lib/members/actor'
import {
  Bath,
  FanHours as FanHoursRow,
  Foundry,
  Member,
  Place,
  Recipe,
  RecipeCoat,
  RecipeVersion,
  Sensor,
  ShiftHours as ShiftHoursRow,
} from '@/models'

/** The shop as it is stored: the ids that the work on its floor needs. */
export type DemoShop = {
  people: ReadonlyMap<DemoPersonKey, Actor>
  sensorIds: Record<DemoAir, number>
  wallSensorId: number
  placeIds: Record<DemoPlace, string>
  bathIds: Record<DemoBath, string>
  recipeVersionIds: Record<DemoRecipe, string>
  sensorTokens: { sensorId: number; name: string; token: string }[]
}

/** Stores the foundry's settings, people, sensors, places, baths and recipes. Takes part in the caller's transaction. */
export async function openShop({
  createdAt,
  passwordHashes,
}: {
  createdAt: number
  passwordHashes: ReadonlyMap<DemoPersonKey, string>
}): Promise<DemoShop> {
  const id = () => newId(createdAt)
  await Foundry.create({
    id: 1,
    name: DEMO_NAME,
    timeZone: DEMO_TIME_ZONE,
    altitudeM: DEMO_ALTITUDE_M,
    isDemo: true,
    setUpAt: createdAt,
    createdAt,
  })
  await ShiftHoursRow.bulkCreate([...DEMO_CALENDAR.hours])

  const people = new Map<DemoPersonKey, Actor>()
  for (const { key, name, role, email } of DEMO_PEOPLE) {
    const member = { id: id(), name, role, isDemo: true }
    await Member.create({ ...member, email, passwordHash: passwordHashes.get(key) ?? '', createdAt })
    people.set(key, member)
  }

  const shellRoom = await Sensor.create({ name: DEMO_LOGGERS['shell room'], kind: 'logger', isDemo: true, createdAt })
  const netLoft = await Sensor.create({ name: DEMO_LOGGERS['net loft'], kind: 'logger', isDemo: true, createdAt })
  const wall = await Sensor.create({ name: DEMO_WALL_HYGROMETER, kind: 'wall hygrometer', isDemo: true, createdAt })
  const sensorIds = { 'shell room': shellRoom.id, 'net loft': netLoft.id }
  const clock: Clock = { now: () => createdAt }
  const sensorTokens: DemoShop['sensorTokens'] = []
  for (const sensor of [shellRoom, netLoft]) {
    const { token } = await issueSensorToken({ sensorId: sensor.id }, { member: people.get('ines') ?? null, clock })
    sensorTokens.push({ sensorId: sensor.id, name: sensor.name, token })
  }

  const placeIds = { fanRack: id(), longRack: id(), netLoft: id(), stillCorner: id(), boatShed: id() }
  for (const key of DEMO_PLACE_KEYS) {
    const { air, fanHours, ...place } = DEMO_PLACES[key]
    const placeId = placeIds[key]
    await Place.create({ id: placeId, ...place, sensorId: air === null ? wall.id : sensorIds[air], isDemo: true, createdAt })
    await FanHoursRow.bulkCreate(fanHours.map((row) => ({ placeId, ...row })))
  }

  const bathIds = { face: id(), backup: id() }
  for (const kind of ['face', 'backup'] as const) {
    await Bath.create({ id: bathIds[kind], name: DEMO_BATH_NAMES[kind], kind, isDemo: true, createdAt })
  }

  const recipeVersionIds = { six: id(), eight: id(), eleven: id() }
  for (const key of ['six', 'eight', 'eleven'] as const) {
    const recipe = await Recipe.create({ id: id(), name: DEMO_RECIPES[key].name, isDemo: true, createdAt })
    const recipeVersionId = recipeVersionIds[key]
    const createdBy = people.get('ines')?.id ?? null
    await RecipeVersion.create({ id: recipeVersionId, recipeId: recipe.id, version: 1, createdBy, createdAt })
    await RecipeCoat.bulkCreate(DEMO_RECIPES[key].coats.map(({ bath, ...coat }) => ({ ...coat, recipeVersionId, bathId: bathIds[bath] })))
  }
  return { people, sensorIds, wallSensorId: wall.id, placeIds, bathIds, recipeVersionIds, sensorTokens }
}
