import { millisecondsInDay } from 'date-fns/constants'
import { issueSensorToken } from '@/lib/commands/issue-sensor-token'
import type { Clock } from '@/lib/core/clock'
import { newId } from '@/lib/core/ids'
import { CAST } from '@/lib/demo/cast'
import type { DemoAir } from '@/lib/demo/climate'
import { DEMO_PEOPLE, type DemoPersonKey } from '@/lib/demo/people'
import {
  DEMO_BATH_NAMES,
  DEMO_LOGGERS,
  DEMO_PLACE_KEYS,
  DEMO_PLACES,
  DEMO_RECIPES,
  DEMO_WALL_HYGROMETER,
  type DemoBath,
  type DemoPlace,
  type DemoRecipe,
} from '@/lib/demo/shop'
import { localDay } from '@/lib/format/local-time'
import type { Actor } from '@/lib/members/actor'
import { Bath, FanHours as FanHoursRow, Member, Place, Recipe, RecipeCoat, RecipeVersion, Sensor, Work } from '@/models'

/** The shop as it is stored: the ids that the work on its floor needs. */
export type DemoShop = {
  people: ReadonlyMap<DemoPersonKey, Actor>
  sensorIds: Record<DemoAir, number>
  wallSensorId: number
  placeIds: Record<DemoPlace, string>
  bathIds: Record<DemoBath, string>
  recipeVersionIds: Record<DemoRecipe, string>
  sensorTokens: { sensorId: number; name: string; token: string }[]
  /** What each work is called here, by the title that the cast knows it by. */
  workTitles: ReadonlyMap<string, string>
  /** Names that were taken, with what stands instead. */
  renamed: { name: string; into: string }[]
}

/**
 * Stores the demo's people, sensors, places, baths and recipes in a foundry. Takes part in the caller's transaction.
 *
 * @param disabledAt set for a demo that is laid over somebody's foundry: there nobody signs in as its people.
 */
export async function openShop({
  createdAt,
  passwordHashes,
  disabledAt = null,
}: {
  createdAt: number
  passwordHashes: ReadonlyMap<DemoPersonKey, string>
  disabledAt?: number | null
}): Promise<DemoShop> {
  const id = () => newId(createdAt)
  const renamed: DemoShop['renamed'] = []
  const free = (name: string, taken: ReadonlySet<string>) => {
    const into = freeName(name, taken)
    if (into !== name) renamed.push({ name, into })
    return into
  }

  const people = new Map<DemoPersonKey, Actor>()
  for (const { key, name, role, email } of DEMO_PEOPLE) {
    const member = { id: id(), name, role, isDemo: true }
    await Member.create({ ...member, email, passwordHash: passwordHashes.get(key) ?? '', disabledAt, createdAt })
    people.set(key, member)
  }

  const sensorNames = new Set((await Sensor.findAll()).map(({ name }) => name.toLowerCase()))
  const addSensor = (name: string, kind: 'logger' | 'wall hygrometer') =>
    Sensor.create({ name: free(name, sensorNames), kind, isDemo: true, createdAt })
  const shellRoom = await addSensor(DEMO_LOGGERS['shell room'], 'logger')
  const netLoft = await addSensor(DEMO_LOGGERS['net loft'], 'logger')
  const wall = await addSensor(DEMO_WALL_HYGROMETER, 'wall hygrometer')
  const sensorIds = { 'shell room': shellRoom.id, 'net loft': netLoft.id }
  const clock: Clock = { now: () => createdAt }
  const sensorTokens: DemoShop['sensorTokens'] = []
  for (const sensor of [shellRoom, netLoft]) {
    const { token } = await issueSensorToken({ sensorId: sensor.id }, { member: people.get('ines') ?? null, clock })
    sensorTokens.push({ sensorId: sensor.id, name: sensor.name, token })
  }

  const placeIds = { fanRack: id(), longRack: id(), netLoft: id(), stillCorner: id(), boatShed: id() }
  const placeNames = new Set((await Place.findAll()).map(({ name }) => name.toLowerCase()))
  for (const key of DEMO_PLACE_KEYS) {
    const { name, air, fanHours, measured, ...place } = DEMO_PLACES[key]
    const placeId = placeIds[key]
    await Place.create({
      id: placeId,
      name: free(name, placeNames),
      ...place,
      ...(measured && {
        airMeasuredOn: localDay(createdAt - measured.daysBefore * millisecondsInDay, 'UTC'),
        airMeasuredWith: measured.with,
        airMeasuredBy: people.get('ines')?.name ?? null,
      }),
      sensorId: air === null ? wall.id : sensorIds[air],
      isDemo: true,
      createdAt,
    })
    await FanHoursRow.bulkCreate(fanHours.map((row) => ({ placeId, ...row })))
  }

  const bathIds = { face: id(), backup: id() }
  const bathNames = new Set((await Bath.findAll()).map(({ name }) => name.toLowerCase()))
  for (const kind of ['face', 'backup'] as const) {
    await Bath.create({ id: bathIds[kind], name: free(DEMO_BATH_NAMES[kind], bathNames), kind, isDemo: true, createdAt })
  }

  const recipeVersionIds = { six: id(), eight: id(), eleven: id() }
  const recipeNames = new Set((await Recipe.findAll()).map(({ name }) => name.toLowerCase()))
  for (const key of ['six', 'eight', 'eleven'] as const) {
    const recipe = await Recipe.create({ id: id(), name: free(DEMO_RECIPES[key].name, recipeNames), isDemo: true, createdAt })
    const recipeVersionId = recipeVersionIds[key]
    const createdBy = people.get('ines')?.id ?? null
    await RecipeVersion.create({ id: recipeVersionId, recipeId: recipe.id, version: 1, createdBy, createdAt })
    await RecipeCoat.bulkCreate(DEMO_RECIPES[key].coats.map(({ bath, ...coat }) => ({ ...coat, recipeVersionId, bathId: bathIds[bath] })))
  }
  const titles = new Set((await Work.findAll()).map(({ title }) => title.toLowerCase()))
  const castTitles = [...new Set(CAST.flatMap(({ pieces }) => pieces.map(({ workTitle }) => workTitle)))]
  const workTitles = new Map(castTitles.map((title) => [title, free(title, titles)]))
  return { people, sensorIds, wallSensorId: wall.id, placeIds, bathIds, recipeVersionIds, sensorTokens, workTitles, renamed }
}

/** The name, or the name with a word behind it where something has it, in whatever capitals. */
function freeName(name: string, taken: ReadonlySet<string>): string {
  for (let count = 1; ; count += 1) {
    const candidate = count === 1 ? name : `${name} (demo${count === 2 ? '' : ` ${count - 1}`})`
    if (!taken.has(candidate.toLowerCase())) return candidate
  }
}
