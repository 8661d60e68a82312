import { DEFAULT_FLAG_LIMITS, type Flag } from '@/lib/drying/flags'
import { fanFactors, placeFactor } from '@/lib/drying/place-factor'
import { roomFactor } from '@/lib/drying/room-factor'
import type { CoatCall } from '@/lib/drying/types'
import type { RoomClimate } from '@/lib/room/climate'
import { isNearWax, limitsBroken, type AirHour } from '@/lib/room/limits'
import type { Harm, SharedHarm, RoomWhatIf, RoomWhatIfAnswer, Slot, WhatIfTree } from '@/lib/room/room-what-if-contract'
import {
  callIn,
  closingOf,
  dryingTrees,
  highestFactor,
  limitedCoat,
  LOWEST_TARGET_PCT,
  nightHours,
  placeIdOf,
  shelledTrees,
  soonerMs,
  tonightOf,
  withHours,
  withPlaceFactor,
  type DryingTree,
  type Stretch,
} from '@/lib/room/tonight'
import type { DerivedTree } from '@/lib/trees/derive'
import type { PlaceFacts } from '@/lib/trees/facts'
import type { FloorContext } from '@/lib/trees/spans'

export type WeighedRoom = {
  context: FloorContext
  trees: readonly DerivedTree[]
  climate: RoomClimate
  /** Of this room, in use. */
  places: readonly PlaceFacts[]
  /** The foundry keeps hours of its own. */
  hasHours: boolean
}

/**
 * What another air would do to everything that hangs in a room: times before and after from the clock itself, how many trees are
 * ready in time, and what it would harm. Changes nothing.
 */
export function weighAir(room: WeighedRoom, choice: RoomWhatIf): RoomWhatIfAnswer {
  const { context, climate } = room
  const { now } = context
  const opensAt = tonightOf(context, room.hasHours).to
  const closesAt = closingOf(context, room.hasHours)
  const stretch = { from: now, to: choice.until === 'closing' ? (closesAt ?? opensAt) : opensAt }
  const hours = airHours(climate, choice, stretch, context)
  const other = contextWith(room, choice, hours, stretch)

  const isHere = (tree: DerivedTree) => context.places.get(placeIdOf(tree))?.sensorId === climate.sensorId
  const drying = dryingTrees(room.trees).filter(isHere)
  const after = new Map(drying.map((tree) => [tree.facts.id, callIn(tree, other)]))
  const harmsOf = harmsTo(room, choice, { hours, stretch, other, after, isHere })
  const slotOf = (call: CoatCall, tree: DryingTree): Slot => slotAt(guardTime(call, tree), closesAt, opensAt)

  const trees = drying.map((tree): WhatIfTree => {
    const call = after.get(tree.facts.id)!
    return {
      treeId: tree.facts.id,
      tag: tree.facts.tag,
      title: tree.facts.title,
      placeName: context.places.get(placeIdOf(tree))?.name ?? '',
      coatNumber: tree.newest.number,
      guard: tree.guard ?? 'likely',
      isUncalibrated: !tree.newest.isCalibrated,
      before: pairOf(tree.call),
      after: pairOf(call),
      readyBefore: slotOf(tree.call, tree),
      readyAfter: slotOf(call, tree),
      harms: harmsOf.get(tree.facts.id)?.map((harm) => harm.code) ?? [],
    }
  })
  const countOf = (slots: readonly Slot[]) => ({
    before: trees.filter((tree) => slots.includes(tree.readyBefore)).length,
    after: trees.filter((tree) => slots.includes(tree.readyAfter)).length,
  })
  return {
    now,
    until: stretch.to,
    closesAt,
    opensAt,
    beforeClosing: closesAt === null ? null : countOf(['closing']),
    beforeOpening: countOf(['closing', 'opening']),
    soonerMs: drying.reduce((sum, tree) => {
      const gain = tree.call.isUnknown ? null : soonerMs(guardTime(tree.call, tree), guardTime(after.get(tree.facts.id)!, tree))
      return sum + (gain ?? 0)
    }, 0),
    harms: joined([...harmsOf].map(([id, harms]) => ({ tag: room.trees.find((tree) => tree.facts.id === id)?.facts.tag ?? '', harms }))),
    trees: trees.toSorted((a, b) => timeOf(a) - timeOf(b) || a.tag.localeCompare(b.tag)),
  }
}

const pairOf = (call: CoatCall) => (call.isUnknown ? null : { likelyAt: call.likelyAt, safeAt: call.safeAt })

const guardTime = (call: CoatCall, { guard }: DryingTree): number | null =>
  call.isUnknown ? null : guard === 'safe' ? call.safeAt : call.likelyAt

/** What waits for its turn first stands first; what is not known stands last. */
const timeOf = ({ guard, before }: WhatIfTree): number => (guard === 'safe' ? before?.safeAt : before?.likelyAt) ?? Infinity

function slotAt(at: number | null, closesAt: number | null, opensAt: number): Slot {
  if (at === null) return 'not in sight'
  if (closesAt !== null && at <= closesAt) return 'closing'
  return at <= opensAt ? 'opening' : 'later'
}

/** The forecast air of a stretch with what was turned in place of it; none where nothing is known of what was not turned. */
function airHours(climate: RoomClimate, choice: RoomWhatIf, stretch: Stretch, { timeZone, pressurePa }: FloorContext): AirHour[] {
  const forecast = nightHours(climate, stretch, timeZone)
  const { airTempC, relHumidityPct } = choice
  if (airTempC === undefined && relHumidityPct === undefined) return forecast
  if (airTempC !== undefined && relHumidityPct !== undefined) {
    const air = { airTempC, relHumidityPct, roomFactor: roomFactor({ airTempC, relHumidityPct }, pressurePa) }
    return [{ ...stretch, ...air }]
  }
  return forecast.map((hour) => {
    const air = { airTempC: airTempC ?? hour.airTempC, relHumidityPct: relHumidityPct ?? hour.relHumidityPct }
    return { ...hour, ...air, roomFactor: roomFactor(air, pressurePa) }
  })
}

function contextWith(
  { context, climate, places }: WeighedRoom,
  { airTempC, relHumidityPct, airSpeedMps, fansOnAt }: RoomWhatIf,
  hours: readonly AirHour[],
  stretch: Stretch,
): FloorContext {
  const isAirTurned = (airTempC !== undefined || relHumidityPct !== undefined) && hours.length > 0
  const turned = isAirTurned ? withHours(context, climate, hours, stretch) : context
  const withFactor = (base: FloorContext, place: PlaceFacts, factor: number) => withPlaceFactor(base, [place.id], factor, stretch)
  if (airSpeedMps !== undefined) {
    const factor = placeFactor(airSpeedMps, context.pressurePa)
    return places.reduce((base, place) => withFactor(base, place, factor), turned)
  }
  return places
    .filter((place) => fansOnAt?.includes(place.id))
    .reduce((base, place) => withFactor(base, place, fanFactors(place, context.pressurePa).on), turned)
}

type Weighed = {
  hours: readonly AirHour[]
  stretch: Stretch
  other: FloorContext
  after: ReadonlyMap<string, CoatCall>
  isHere: (tree: DerivedTree) => boolean
}

/** What the air would do to each shell of the room, the worst of each kind; shells that it harms not are left out. */
function harmsTo(room: WeighedRoom, choice: RoomWhatIf, { hours, stretch, other, after, isHere }: Weighed): Map<string, Harm[]> {
  const shells = shelledTrees(room.trees).filter(isHere)
  const coats = shells.map((tree) => {
    const coat = limitedCoat(tree, highestFactor(other, placeIdOf(tree), stretch), room.climate.newest?.airTempC ?? null)
    const call = after.get(tree.facts.id)
    // In a slower air the coat stays wet for longer.
    return call ? { ...coat, wetUntil: Math.max(coat.wetUntil, call.safeAt ?? Infinity) } : coat
  })
  const harms = new Map<string, Harm[]>()
  const add = (index: number, harm: Harm) => {
    const id = shells[index]!.facts.id
    const known = harms.get(id) ?? []
    const same = known.find(({ code }) => code === harm.code)
    harms.set(id, [...known.filter((one) => one !== same), same ? worse(same, harm) : harm])
  }
  for (const hour of hours) {
    for (const [index, flags] of limitsBroken(hour, coats, room.context.pressurePa).entries()) {
      for (const flag of flags) {
        const harm = harmOf(flag, hour.from)
        if (harm) add(index, harm)
      }
    }
  }
  const { relHumidityPct } = choice
  if (relHumidityPct !== undefined && relHumidityPct < LOWEST_TARGET_PCT) {
    for (const [index, coat] of coats.entries()) {
      const isWetFace = isNearWax(coat.coatNumber) && coat.wetUntil > stretch.from
      if (isWetFace) add(index, { code: 'too dry', relHumidityPct, limitPct: LOWEST_TARGET_PCT, from: stretch.from })
    }
  }
  return harms
}

function harmOf(flag: Flag, from: number): Harm | null {
  switch (flag.code) {
    case 'chill':
      return flag.measure === 'depression'
        ? { code: 'chill', level: flag.level, wetBulbGapK: flag.value, limitK: flag.limit, from }
        : { code: 'too fast', speed: flag.value, limit: flag.limit, from }
    case 'swing':
      return { code: 'swing', deviationK: flag.deviationK, limitK: flag.limitK, from }
    case 'heat':
      return { code: 'heat', measure: flag.measure, value: flag.value, limit: flag.limit, from }
    case 'damp':
    case 'damp in store':
    case 'stale':
      return null
  }
}

/** How far a harm lies past its limit: an absolute temperature weighs more than a rise. */
function sizeOf(harm: Harm): number {
  switch (harm.code) {
    case 'chill':
      return harm.wetBulbGapK
    case 'too fast':
      return harm.speed
    case 'swing':
      return Math.abs(harm.deviationK)
    case 'heat':
      return harm.measure === 'room' ? harm.value : harm.value - DEFAULT_FLAG_LIMITS.heatC
    case 'too dry':
      return -harm.relHumidityPct
  }
}

const worse = (one: Harm, other: Harm): Harm => ({
  ...(sizeOf(other) > sizeOf(one) ? other : one),
  from: Math.min(one.from, other.from),
})

const ORDER: readonly Harm['code'][] = ['heat', 'chill', 'too fast', 'swing', 'too dry']

/** The same harm to several trees is said once. */
function joined(trees: readonly { tag: string; harms: readonly Harm[] }[]): SharedHarm[] {
  return ORDER.flatMap((code): SharedHarm[] => {
    const hit = trees.flatMap(({ tag, harms }) => harms.filter((harm) => harm.code === code).map((harm) => ({ tag, harm })))
    const [first] = hit
    if (!first) return []
    return [{ harm: hit.reduce((worst, { harm }) => worse(worst, harm), first.harm), tags: hit.map(({ tag }) => tag).toSorted() }]
  })
}
