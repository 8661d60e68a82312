import type { DemoAir } from '@/lib/demo/climate'
import type { FanHours, PlaceAir } from '@/lib/drying/types'
import { startingCoats, type CoatLine, type StartingCoat } from '@/lib/recipes/starting-coats'
import type { AirMeter } from '@/lib/room/place-air'
import type { WorkCalendar } from '@/lib/schedule/shifts'

export const DEMO_NAME = 'Marram Lane Art Foundry'

const everyWeekday = [1, 2, 3, 4, 5]
const SATURDAY = 6

export const DEMO_CALENDAR: WorkCalendar = {
  hours: [
    ...everyWeekday.map((weekday) => ({ weekday, opensMinute: 7 * 60, closesMinute: 17 * 60 })),
    { weekday: SATURDAY, opensMinute: 8 * 60, closesMinute: 12 * 60 },
  ],
  closures: [],
}

/** Where and when the demo happens: in a foundry of its own, or in the one that it is laid over. */
export type DemoSetting = { timeZone: string; altitudeM: number; calendar: WorkCalendar }

export const DEMO_SETTING: DemoSetting = { timeZone: 'Europe/London', altitudeM: 4, calendar: DEMO_CALENDAR }

/** Names of the loggers by the air they hang in; the wall hygrometer is read by people. */
export const DEMO_LOGGERS: Record<DemoAir, string> = { 'shell room': 'Shell room logger', 'net loft': 'Net loft logger' }
export const DEMO_WALL_HYGROMETER = 'Boat shed hygrometer'

/** Fans run a little longer than people do, and never at night or on a Sunday. */
const fansOn = (weekdayOff: number): FanHours[] => [
  ...everyWeekday.map((weekday) => ({ weekday, onMinute: 7 * 60, offMinute: weekdayOff })),
  { weekday: SATURDAY, onMinute: 8 * 60, offMinute: 13 * 60 },
]

type DemoPlaceFacts = PlaceAir & {
  name: string
  air: DemoAir | null
  /** How many days before the demo's first one its air speeds were measured, and with what; null: an estimate. */
  measured: { daysBefore: number; with: AirMeter } | null
}

export const DEMO_PLACES = {
  fanRack: {
    name: 'Fan rack',
    air: 'shell room',
    airSpeedFansOnMps: 1.5,
    airSpeedFansOffMps: 0.1,
    fanDuty: 1,
    fanHours: fansOn(18 * 60),
    measured: { daysBefore: 5, with: 'hot-wire meter' },
  },
  longRack: {
    name: 'Long rack',
    air: 'shell room',
    airSpeedFansOnMps: 0.5,
    airSpeedFansOffMps: 0.1,
    fanDuty: 1,
    fanHours: fansOn(18 * 60),
    measured: { daysBefore: 5, with: 'hot-wire meter' },
  },
  // One fan that swings: it blows on each tree for most of its turn.
  netLoft: {
    name: 'Net loft',
    air: 'net loft',
    airSpeedFansOnMps: 0.8,
    airSpeedFansOffMps: 0.2,
    fanDuty: 0.7,
    fanHours: fansOn(19 * 60),
    measured: { daysBefore: 388, with: 'vane meter' },
  },
  stillCorner: {
    name: 'Still corner',
    air: 'shell room',
    airSpeedFansOnMps: 0.1,
    airSpeedFansOffMps: 0.1,
    fanDuty: 1,
    fanHours: [],
    measured: null,
  },
  boatShed: { name: 'Boat shed', air: null, airSpeedFansOnMps: 0.1, airSpeedFansOffMps: 0.1, fanDuty: 1, fanHours: [], measured: null },
} as const satisfies Record<string, DemoPlaceFacts>
export type DemoPlace = keyof typeof DEMO_PLACES
export const DEMO_PLACE_KEYS = ['fanRack', 'longRack', 'netLoft', 'stillCorner', 'boatShed'] as const satisfies readonly DemoPlace[]

export type DemoBath = 'face' | 'backup'
export const DEMO_BATH_NAMES: Record<DemoBath, string> = { face: 'Face slurry', backup: 'Backup slurry' }

export type DemoRecipeCoat = Omit<StartingCoat, 'bathKind'> & { number: number; bath: DemoBath }

const FIRST_FACE: CoatLine = {
  kind: 'face',
  stucco: 'fine',
  readAloud: 'Slow into the slurry, turn it, break every bubble with the brush. Even and matte before the sand.',
}
const SECOND_FACE: CoatLine = {
  kind: 'face',
  stucco: 'fine',
  readAloud: 'Blow off loose sand first. Prewet, drain to matte, then dip slowly.',
}
const MEDIUM: CoatLine = {
  kind: 'backup',
  stucco: 'medium',
  readAloud: 'Prewet, dip, drain with the cup down. Look into the undercuts.',
}
const COARSE: CoatLine = { kind: 'backup', stucco: 'coarse', readAloud: 'Dip and turn once. Coarse sand all round, edges twice.' }
const CORE_FILL: CoatLine = {
  kind: 'core fill',
  stucco: 'coarse',
  readAloud: 'Fill the open core, tamp it lightly, leave the drain holes free.',
}
const SEAL: CoatLine = { kind: 'seal', stucco: 'none', readAloud: 'Slurry only, no sand. Keep the cup rim clean.' }

const coatsOf = (lines: readonly CoatLine[]): DemoRecipeCoat[] =>
  startingCoats(lines).map(({ bathKind, ...coat }, index) => ({ ...coat, number: index + 1, bath: bathKind }))

const lines = (line: CoatLine, count: number): CoatLine[] => Array.from({ length: count }, () => line)

export const DEMO_RECIPES = {
  six: { name: 'Six coats, small work', coats: coatsOf([FIRST_FACE, SECOND_FACE, MEDIUM, ...lines(COARSE, 2), SEAL]) },
  eight: { name: 'Eight coats, standard', coats: coatsOf([FIRST_FACE, SECOND_FACE, ...lines(MEDIUM, 2), ...lines(COARSE, 3), SEAL]) },
  eleven: {
    name: 'Eleven coats, large and hollow work',
    coats: coatsOf([FIRST_FACE, SECOND_FACE, ...lines(MEDIUM, 2), CORE_FILL, ...lines(COARSE, 5), SEAL]),
  },
} as const satisfies Record<string, { name: string; coats: DemoRecipeCoat[] }>
export type DemoRecipe = keyof typeof DEMO_RECIPES
