import { issueSensorToken } from '@/lib/commands/issue-sensor-token'
import type { Clock } from '@/lib/core/clock'
import { newId } from '@/lib/core/ids'
import type { CoatKind, Guard, Stucco } from '@/lib/coats/vocabulary'
import type { DemoAir } from '@/lib/demo/climate'
import { DEMO_PEOPLE, type DemoPersonKey } from '@/lib/demo/people'
import {
  DEFAULT_LAST_MOISTURE_TARGET,
  DEFAULT_LONGEST_WAIT_HOURS,
  DEFAULT_MOISTURE_TARGET,
  defaultReferenceHours,
} from '@/lib/drying/recipe-defaults'
import type { FanHours, PlaceAir } from '@/lib/drying/types'
import type { Actor } from '@/lib/members/actor'
import type { ShiftHours } from '@/lib/schedule/shifts'
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

export const DEMO_NAME = 'Marram Lane Art Foundry'
export const DEMO_TIME_ZONE = 'Europe/London'
export const DEMO_ALTITUDE_M = 4

const everyWeekday = [1, 2, 3, 4, 5]
const SATURDAY = 6

export const DEMO_SHIFTS: readonly ShiftHours[] = [
  ...everyWeekday.map((weekday) => ({ weekday, opensMinute: 7 * 60, closesMinute: 17 * 60 })),
  { weekday: SATURDAY, opensMinute: 8 * 60, closesMinute: 12 * 60 },
]

/** Names of the loggers by the air they hang in; the wall hygrometer is read by people. */
export const DEMO_LOGGERS: Record<DemoAir, string> = { 'shell room': 'Shell room logger', 'net loft': 'Net loft logger' }
const WALL_HYGROMETER = 'Boat shed hygrometer'

/** Fans run a little longer than people do, and never at night or on a Sunday. */
const fansOn = (weekdayOff: number): FanHours[] => [
  ...everyWeekday.map((weekday) => ({ weekday, onMinute: 7 * 60, offMinute: weekdayOff })),
  { weekday: SATURDAY, onMinute: 8 * 60, offMinute: 13 * 60 },
]

export const DEMO_PLACES = {
  fanRack: { name: 'Fan rack', air: 'shell room', airSpeedFansOnMps: 1.5, airSpeedFansOffMps: 0.1, fanHours: fansOn(18 * 60) },
  longRack: { name: 'Long rack', air: 'shell room', airSpeedFansOnMps: 0.5, airSpeedFansOffMps: 0.1, fanHours: fansOn(18 * 60) },
  netLoft: { name: 'Net loft', air: 'net loft', airSpeedFansOnMps: 0.6, airSpeedFansOffMps: 0.2, fanHours: fansOn(19 * 60) },
  stillCorner: { name: 'Still corner', air: 'shell room', airSpeedFansOnMps: 0.1, airSpeedFansOffMps: 0.1, fanHours: [] },
  boatShed: { name: 'Boat shed', air: null, airSpeedFansOnMps: 0.1, airSpeedFansOffMps: 0.1, fanHours: [] },
} as const satisfies Record<string, PlaceAir & { name: string; air: DemoAir | null }>
export type DemoPlace = keyof typeof DEMO_PLACES
export const DEMO_PLACE_KEYS = ['fanRack', 'longRack', 'netLoft', 'stillCorner', 'boatShed'] as const satisfies readonly DemoPlace[]

export type DemoBath = 'face' | 'backup'
const BATH_NAMES: Record<DemoBath, string> = { face: 'Face slurry', backup: 'Backup slurry' }

export type DemoRecipeCoat = {
  number: number
  kind: CoatKind
  bath: DemoBath
  stucco: Stucco
  needReferenceHours: number
  moistureTarget: number
  guard: Guard
  drainSeconds: number
  longestWaitHours: number
  isPrewet: boolean
  readAloud: string
}

type Line = [kind: CoatKind, stucco: Stucco, readAloud: string]

const FIRST_FACE: Line = ['face', 'fine', 'Slow into the slurry, turn it, break every bubble with the brush. Even and matte before the sand.']
const SECOND_FACE: Line = ['face', 'fine', 'Blow off loose sand first. Prewet, drain to matte, then dip slowly.']
const MEDIUM: Line = ['backup', 'medium', 'Prewet, dip, drain with the cup down. Look into the undercuts.']
const COARSE: Line = ['backup', 'coarse', 'Dip and turn once. Coarse sand all round, edges twice.']
const CORE_FILL: Line = ['core fill', 'coarse', 'Fill the open core, tamp it lightly, leave the drain holes free.']
const SEAL: Line = ['seal', 'none', 'Slurry only, no sand. Keep the cup rim clean.']

const DRAIN_SECONDS: Record<CoatKind, number> = { face: 75, backup: 40, 'core fill': 60, seal: 45 }

/** Coats from lines: needs from our own starting values, so that nothing in the demo claims to be calibrated. */
function coatsOf(lines: readonly Line[]): DemoRecipeCoat[] {
  return lines.map(([kind, stucco, readAloud], index) => ({
    number: index + 1,
    kind,
    bath: kind === 'face' ? 'face' : 'backup',
    stucco,
    needReferenceHours: defaultReferenceHours(kind, lines.slice(0, index).filter(([earlier]) => earlier === kind).length),
    moistureTarget: kind === 'seal' ? DEFAULT_LAST_MOISTURE_TARGET : DEFAULT_MOISTURE_TARGET,
    guard: kind === 'face' || kind === 'seal' ? 'safe' : 'likely',
    drainSeconds: DRAIN_SECONDS[kind],
    longestWaitHours: DEFAULT_LONGEST_WAIT_HOURS[kind],
    isPrewet: index > 0 && kind !== 'core fill',
    readAloud,
  }))
}

const lines = (line: Line, count: number): Line[] => Array.from({ length: count }, () => line)

export const DEMO_RECIPES = {
  six: { name: 'Six coats, small work', coats: coatsOf([FIRST_FACE, SECOND_FACE, MEDIUM, ...lines(COARSE, 2), SEAL]) },
  eight: { name: 'Eight coats, standard', coats: coatsOf([FIRST_FACE, SECOND_FACE, ...lines(MEDIUM, 2), ...lines(COARSE, 3), SEAL]) },
  eleven: {
    name: 'Eleven coats, large and hollow work',
    coats: coatsOf([FIRST_FACE, SECOND_FACE, ...lines(MEDIUM, 2), CORE_FILL, ...lines(COARSE, 5), SEAL]),
  },
} as const satisfies Record<string, { name: string; coats: DemoRecipeCoat[] }>
export type DemoRecipe = keyof typeof DEMO_RECIPES

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
  await Foundry.create({ id: 1, name: DEMO_NAME, timeZone: DEMO_TIME_ZONE, altitudeM: DEMO_ALTITUDE_M, isDemo: true, createdAt })
  await ShiftHoursRow.bulkCreate([...DEMO_SHIFTS])

  const people = new Map<DemoPersonKey, Actor>()
  for (const { key, name, role, email } of DEMO_PEOPLE) {
    const member = { id: id(), name, role }
    await Member.create({ ...member, email, passwordHash: passwordHashes.get(key) ?? '', createdAt })
    people.set(key, member)
  }

  const shellRoom = await Sensor.create({ name: DEMO_LOGGERS['shell room'], kind: 'logger', createdAt })
  const netLoft = await Sensor.create({ name: DEMO_LOGGERS['net loft'], kind: 'logger', createdAt })
  const wall = await Sensor.create({ name: WALL_HYGROMETER, kind: 'wall hygrometer', createdAt })
  const sensorIds = { 'shell room': shellRoom.id, 'net loft': netLoft.id }
  const clock: Clock = { now: () => createdAt }
  const sensorTokens: DemoShop['sensorTokens'] = []
  for (const sensor of [shellRoom, netLoft]) {
    const { token } = await issueSensorToken({ sensorId: sensor.id, memberId: people.get('ines')?.id ?? null }, { clock })
    sensorTokens.push({ sensorId: sensor.id, name: sensor.name, token })
  }

  const placeIds = { fanRack: id(), longRack: id(), netLoft: id(), stillCorner: id(), boatShed: id() }
  for (const key of DEMO_PLACE_KEYS) {
    const { air, fanHours, ...place } = DEMO_PLACES[key]
    const placeId = placeIds[key]
    await Place.create({ id: placeId, ...place, sensorId: air === null ? wall.id : sensorIds[air], createdAt })
    await FanHoursRow.bulkCreate(fanHours.map((row) => ({ placeId, ...row })))
  }

  const bathIds = { face: id(), backup: id() }
  for (const kind of ['face', 'backup'] as const) await Bath.create({ id: bathIds[kind], name: BATH_NAMES[kind], kind, createdAt })

  const recipeVersionIds = { six: id(), eight: id(), eleven: id() }
  for (const key of ['six', 'eight', 'eleven'] as const) {
    const recipe = await Recipe.create({ id: id(), name: DEMO_RECIPES[key].name, createdAt })
    const recipeVersionId = recipeVersionIds[key]
    const createdBy = people.get('ines')?.id ?? null
    await RecipeVersion.create({ id: recipeVersionId, recipeId: recipe.id, version: 1, createdBy, createdAt })
    await RecipeCoat.bulkCreate(
      DEMO_RECIPES[key].coats.map(({ bath, ...coat }) => ({ ...coat, recipeVersionId, bathId: bathIds[bath] })),
    )
  }
  return { people, sensorIds, wallSensorId: wall.id, placeIds, bathIds, recipeVersionIds, sensorTokens }
}
