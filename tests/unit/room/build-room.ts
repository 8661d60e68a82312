import { RECESS_FACTOR } from '@/lib/drying/need'
import { roomFactor } from '@/lib/drying/room-factor'
import type { FanSwitch, RoomReading } from '@/lib/drying/types'
import type { CoatKind, RecessClass, Stucco } from '@/lib/coats/vocabulary'
import { buildClimate, type ClimateHour, type RoomClimate } from '@/lib/room/climate'
import { shiftsFrom, type WorkCalendar } from '@/lib/schedule/shifts'
import type { PlaceFacts, TreeFacts } from '@/lib/trees/facts'
import { deriveTree, type DerivedTree } from '@/lib/trees/derive'
import { floorContext, type FloorContext } from '@/lib/trees/spans'

export const HOUR = 3_600_000
export const MINUTE = 60_000
/** Tuesday 13 October 2026, 16:00 in London: an hour before the doors close. */
export const NOW = Date.parse('2026-10-13T15:00:00Z')
export const TIME_ZONE = 'Europe/London'
const PRESSURE_PA = 101_325

export const WEEK: WorkCalendar = {
  hours: [1, 2, 3, 4, 5].map((weekday) => ({ weekday, opensMinute: 420, closesMinute: 1020 })),
  closures: [],
}

export type Air = { airTempC: number; relHumidityPct: number }
export const RECIPE_AIR: Air = { airTempC: 21, relHumidityPct: 50 }

/** The air of a test is one of a few, at hundreds of instants. */
const factors = new Map<string, number>()
function factorOf(air: Air): number {
  const key = `${air.airTempC} ${air.relHumidityPct}`
  const known = factors.get(key) ?? roomFactor(air, PRESSURE_PA)
  factors.set(key, known)
  return known
}

/** A whole hour of one air. */
export function buildHour(hourStart: number, air: Air, overrides: Partial<ClimateHour> = {}): ClimateHour {
  const factor = factorOf(air)
  return {
    hourStart,
    dose: { likely: factor, low: factor, high: factor },
    coveredMinutes: 60,
    gapMinutes: 0,
    hasTyped: false,
    readingCount: 12,
    typedCount: 0,
    meanAirTempC: air.airTempC,
    minAirTempC: air.airTempC,
    maxAirTempC: air.airTempC,
    meanRelHumidityPct: air.relHumidityPct,
    maxRelHumidityPct: air.relHumidityPct,
    ...overrides,
  }
}

export function buildRoomReading(measuredAt: number, air: Air, source: RoomReading['source'] = 'sensor'): RoomReading {
  return { measuredAt, ...air, roomFactor: factorOf(air), source }
}

/** A room whose air at an instant is told by a function, for a fortnight up to now; silent for the last `silentHours`. */
export function buildRoom(
  airAt: (at: number) => Air,
  { sensorId = 1, now = NOW, silentHours = 0, days = 14 }: { sensorId?: number; now?: number; silentHours?: number; days?: number } = {},
): RoomClimate {
  const newestAt = now - silentHours * HOUR
  const tailFrom = Math.floor(newestAt / HOUR) * HOUR
  const hours = Array.from({ length: days * 24 }, (_, index) => {
    const hourStart = tailFrom - (index + 1) * HOUR
    return buildHour(hourStart, airAt(hourStart))
  }).toReversed()
  const readings: RoomReading[] = []
  for (let at = tailFrom - 30 * HOUR; at <= newestAt; at += 10 * MINUTE) readings.push(buildRoomReading(at, airAt(at)))
  const refinedHours = [...new Set(readings.map((reading) => Math.floor(reading.measuredAt / HOUR) * HOUR))]
  return buildClimate({ sensorId, hours, readings, refinedHours, newest: readings.at(-1) ?? null }, { now, timeZone: TIME_ZONE })
}

export function buildPlaceFacts(id: string, overrides: Partial<PlaceFacts> = {}): PlaceFacts {
  return {
    id,
    name: id,
    sensorId: 1,
    isTypedOnly: false,
    airSpeedFansOnMps: 1,
    airSpeedFansOffMps: 1,
    fanDuty: 1,
    fanHours: [],
    formerAirs: [],
    isRetired: false,
    ...overrides,
  }
}

export function buildContext({
  climates = [buildRoom(() => RECIPE_AIR)],
  places = [buildPlaceFacts('Rack')],
  now = NOW,
  calendar = WEEK,
  fanSwitches = new Map(),
}: {
  climates?: RoomClimate[]
  places?: PlaceFacts[]
  now?: number
  calendar?: WorkCalendar
  fanSwitches?: ReadonlyMap<string, readonly FanSwitch[]>
} = {}): FloorContext {
  return floorContext({
    recessFactors: RECESS_FACTOR,
    now,
    timeZone: TIME_ZONE,
    pressurePa: PRESSURE_PA,
    climates,
    places,
    fanSwitches,
    shifts: shiftsFrom(now, calendar, TIME_ZONE),
    from: now - 14 * 24 * HOUR,
  })
}

const RECIPE: { kind: CoatKind; stucco: Stucco; need: number }[] = [
  { kind: 'face', stucco: 'fine', need: 2.5 },
  { kind: 'face', stucco: 'fine', need: 3 },
  { kind: 'backup', stucco: 'medium', need: 4 },
  { kind: 'backup', stucco: 'coarse', need: 4.16 },
  { kind: 'seal', stucco: 'none', need: 12 },
]

export type TreeSpec = {
  tag?: string
  /** The number of the newest coat. */
  coat?: number
  hoursAgo?: number
  need?: number
  placeId?: string
  recessClass?: RecessClass
  airTempAtDipC?: number | null
  hold?: TreeFacts['hold']
}

/** A tree whose newest coat hangs at a place, derived in a context. */
export function buildDerived(context: FloorContext, spec: TreeSpec = {}): DerivedTree {
  const { tag = 'T-1', coat = 3, hoursAgo = 1, placeId = 'Rack', recessClass = 'none' } = spec
  const newestAt = context.now - hoursAgo * HOUR
  const facts: TreeFacts = {
    id: tag,
    tag,
    title: tag,
    isDemo: false,
    recessClass,
    spacing: 'open',
    pourDate: null,
    intakePassedAt: newestAt - 100 * HOUR,
    releasedAt: null,
    scrappedAt: null,
    recipe: {
      versionId: 'v',
      name: 'Recipe',
      version: 1,
      coats: RECIPE.map((line, index) => ({
        number: index + 1,
        kind: line.kind,
        bathId: 'b',
        bathName: 'Bath',
        stucco: line.stucco,
        needReferenceHours: line.need,
        moistureTarget: 0.1,
        guard: 'likely' as const,
        drainSeconds: 60,
        longestWaitHours: 72,
        isPrewet: false,
        readAloud: '',
        needSpread: 0.25,
        isCalibrated: true,
      })),
    },
    coats: RECIPE.slice(0, coat).map((line, index) => ({
      id: `${tag}-${index + 1}`,
      number: index + 1,
      kind: line.kind,
      stucco: line.stucco,
      way: 'dip' as const,
      placeId,
      dippedAt: newestAt - (coat - 1 - index) * 10 * HOUR,
      drainSeconds: 60,
      roughMinutes: 0,
      needReferenceHours: index + 1 === coat ? (spec.need ?? line.need) : line.need,
      airTempC: spec.airTempAtDipC === undefined ? 21 : spec.airTempAtDipC,
      moistureTarget: 0.1,
      guard: 'likely' as const,
      longestWaitHours: 72,
      needSpread: 0.25,
      isCalibrated: true,
      recessFactor: 1,
      coveredAt: null,
      moistureRatioAtRedip: null,
      evidence: [],
    })),
    stays: [{ placeId, since: newestAt - 200 * HOUR }],
    hold: spec.hold ?? null,
    waxWeighings: [],
    word: null,
    lookedOverAt: null,
  }
  return deriveTree(facts, context, WEEK)
}
