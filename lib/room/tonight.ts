import { millisecondsInHour } from 'date-fns/constants'
import { forecastHours } from '@/lib/drying/forecast'
import { fanFactors } from '@/lib/drying/place-factor'
import { cutCurve } from '@/lib/drying/room-curve'
import { roomFactor } from '@/lib/drying/room-factor'
import { constantSegment } from '@/lib/drying/room-segments'
import { doseOverSpans } from '@/lib/drying/tree-dose'
import type { CoatCall, RoomSegment } from '@/lib/drying/types'
import { formatClock, formatWeekday } from '@/lib/format/local-time'
import type { RoomClimate } from '@/lib/room/climate'
import { breaksLimits, isNearWax, type AirHour, type LimitedCoat } from '@/lib/room/limits'
import { callOf } from '@/lib/trees/assess'
import type { DerivedTree } from '@/lib/trees/derive'
import type { CoatFacts, PlaceFacts } from '@/lib/trees/facts'
import { dryingSpans, withClimates, type FloorContext } from '@/lib/trees/spans'

/** The time that the page weighs: from now to the next opening. */
export type Tonight = Stretch & { name: string }

/** From one instant to another. */
export type Stretch = { from: number; to: number }

const DAY_MS = 24 * millisecondsInHour

/**
 * From now to the next time the doors open, and what to call it: 'Tonight', or 'Until Mon 07:00' over a closed day. A foundry without hours
 * of its own is looked at over a day.
 */
export function tonightOf(context: FloorContext, hasHours: boolean): Tonight {
  const { now, shifts, timeZone } = context
  const [first, second] = shifts
  const next = first && first.opensAt > now ? first : second
  if (!hasHours || !next) return { from: now, to: now + DAY_MS, name: 'The next 24 h' }
  const to = next.opensAt
  return { from: now, to, name: to - now > DAY_MS ? `Until ${formatWeekday(to, timeZone)} ${formatClock(to, timeZone)}` : 'Tonight' }
}

/** When the doors close; null while they are closed, and where a foundry keeps no hours of its own. */
export function closingOf({ now, shifts }: FloorContext, hasHours: boolean): number | null {
  const [shift] = shifts
  return hasHours && shift && shift.opensAt <= now ? shift.closesAt : null
}

/** A tree whose newest coat dries, with the clock's call on it. */
export type DryingTree = DerivedTree & { newest: CoatFacts; call: CoatCall }

/** Trees that are drying now, the unknown ones among them; those that may be dipped over, or are dried out, are not. */
export const dryingTrees = (trees: readonly DerivedTree[]): DryingTree[] => trees.filter(isDrying)

function isDrying(tree: DerivedTree): tree is DryingTree {
  if (tree.newest === null || tree.call === null) return false
  if (tree.state === 'held') return tree.call.guardReachedAt === null && !(tree.isLastOn && tree.call.isSafeDry)
  return ['wet', 'drying', 'nearly dry', 'last coat on', 'unknown'].includes(tree.state)
}

export type Pair = { likelyAt: number | null; safeAt: number | null }

const pairOf = ({ likelyAt, safeAt }: CoatCall): Pair => ({ likelyAt, safeAt })

/** The curve of a room with another air from one instant to another. */
function withAir(climate: RoomClimate, segments: readonly RoomSegment[], { from, to }: Stretch): RoomClimate {
  return { ...climate, curve: [...cutCurve(climate.curve, -Infinity, from), ...segments, ...cutCurve(climate.curve, to, Infinity)] }
}

/** The same floor in the recipe's room through the night: 21 degC and 50 %, each tree in the air of its own place. */
function inRecipeRoom(context: FloorContext, tonight: Tonight): FloorContext {
  const steady = [constantSegment(tonight.from, tonight.to, 'forecast', 1)]
  return withClimates(
    context,
    [...context.climates.values()].map((climate) => withAir(climate, steady, tonight)),
  )
}

/** The forecast air of a room through the night, hour by hour; none where nothing is known of it. */
export function nightHours(climate: RoomClimate, tonight: Stretch, timeZone: string): AirHour[] {
  const horizonHours = (tonight.to - tonight.from) / millisecondsInHour
  const ask = (valueOf: (hour: RoomClimate['hours'][number]) => number | null, last: number | null) =>
    forecastHours(valueOf, { hours: climate.hours, now: tonight.from, timeZone, last, horizonHours })
  const humidities = new Map(
    ask((hour) => hour.meanRelHumidityPct, climate.newest?.relHumidityPct ?? null).map((hour) => [hour.from, hour]),
  )
  return ask((hour) => hour.meanAirTempC, climate.newest?.airTempC ?? null).flatMap(({ from, to, likely }) => {
    const humidity = humidities.get(from)
    const [segment] = cutCurve(climate.curve, from, to)
    return humidity && segment ? [{ from, to, airTempC: likely, relHumidityPct: humidity.likely, roomFactor: segment.likely.start }] : []
  })
}

/** A tree with wax in its shell: at least one coat is on. */
export type ShelledTree = DerivedTree & { newest: CoatFacts }

/** Trees with wax in their shells: what heat may crack, dry ones among them. */
export const shelledTrees = (trees: readonly DerivedTree[]): ShelledTree[] =>
  trees.filter((tree): tree is ShelledTree => tree.newest !== null && tree.facts.releasedAt === null && tree.facts.scrappedAt === null)

/**
 * A tree as far as the limits ask. A wet coat counts as wet until its safe time as things stand, which a faster air only brings nearer.
 *
 * @param airTempNowC what the swing is measured from where nobody knows the room at the dip.
 */
export const limitedCoat = (tree: ShelledTree, placeFactorThere: number, airTempNowC: number | null): LimitedCoat => ({
  coatNumber: tree.newest.number,
  placeFactor: placeFactorThere,
  airTempAtCoat1C: tree.facts.coats[0]?.airTempC ?? null,
  airTempAtDipC: tree.newest.airTempC ?? airTempNowC,
  wetUntil: isDrying(tree) ? (tree.call.safeAt ?? Infinity) : -Infinity,
})

/** The highest place factor of a place in a stretch of time. */
export function highestFactor(context: FloorContext, placeId: string, { from, to }: Stretch): number {
  const spans = (context.placeSpans.get(placeId) ?? []).filter((span) => span.to > from && span.from < to)
  return spans.reduce((highest, span) => Math.max(highest, span.placeFactor), 0)
}

/** Where a tree hangs. */
export const placeIdOf = (tree: DerivedTree) => tree.facts.stays.at(-1)?.placeId ?? ''

/** The highest place factor of a tree's own place until the next opening. */
export const placeFactorTonight = (tree: DerivedTree, context: FloorContext, tonight: Tonight): number =>
  highestFactor(context, placeIdOf(tree), tonight)

/** Face coats are not dried under this. Common practice, no source. */
export const LOWEST_TARGET_PCT = 45
const TARGET_STEP_PCT = 5
/** A forecast this little above the target is not worth a machine. */
const LEAST_DROP_PCT = 3

/** Bringing one room's humidity down through the night. */
export type Dryer = { sensorId: number; targetPct: number; context: FloorContext; hours: AirHour[] }

/**
 * The humidity to bring a room down to through the night: the middle of the recipe's band, in fives, never under 45 %, and higher
 * where a wet coat or the wax would suffer. Null where the air is dry enough, not known, or every choice breaks a limit.
 *
 * @source our own rule; the limits are those of the flags.
 */
export function dryerFor(
  context: FloorContext,
  climate: RoomClimate,
  trees: readonly ShelledTree[],
  tonight: Tonight,
  band: { lowRhPct: number; highRhPct: number },
): Dryer | null {
  const hours = nightHours(climate, tonight, context.timeZone)
  const coats = trees.map((tree) => limitedCoat(tree, placeFactorTonight(tree, context, tonight), climate.newest?.airTempC ?? null))
  const middle = Math.round((band.lowRhPct + band.highRhPct) / 2 / TARGET_STEP_PCT) * TARGET_STEP_PCT
  const driest = Math.max(LOWEST_TARGET_PCT, middle)
  for (let targetPct = driest; targetPct <= Math.max(driest, band.highRhPct); targetPct += TARGET_STEP_PCT) {
    if (!hours.some((hour) => hour.relHumidityPct > targetPct + LEAST_DROP_PCT)) return null
    const dried = hours.map((hour) => driedHour(hour, targetPct, context.pressurePa))
    if (breaksLimits(dried, coats, context.pressurePa)) continue
    return { sensorId: climate.sensorId, targetPct, context: withHours(context, climate, dried, tonight), hours: dried }
  }
  return null
}

/** The machine takes water out and adds none: an hour that is dry enough already stays as it is. */
function driedHour(hour: AirHour, targetPct: number, pressurePa: number): AirHour {
  if (hour.relHumidityPct <= targetPct) return hour
  const factor = roomFactor({ airTempC: hour.airTempC, relHumidityPct: targetPct }, pressurePa)
  return { ...hour, relHumidityPct: targetPct, roomFactor: Math.max(hour.roomFactor, factor) }
}

/** The floor with the air of one room as some hours have it. */
export function withHours(context: FloorContext, climate: RoomClimate, hours: readonly AirHour[], stretch: Stretch): FloorContext {
  const segments = hours.map((hour) => constantSegment(hour.from, hour.to, 'forecast', hour.roomFactor))
  const climates = [...context.climates.values()].map((other) => (other === climate ? withAir(climate, segments, stretch) : other))
  return withClimates(context, climates)
}

/** Leaving the fans of one place on through the night. */
export type FansOn = { place: PlaceFacts; context: FloorContext }

/** The floor with a place's fans left on through the night; null where it has none to switch, or a wet coat would suffer. */
export function fansLeftOn(context: FloorContext, place: PlaceFacts, trees: readonly ShelledTree[], tonight: Tonight): FansOn | null {
  const climate = context.climates.get(place.sensorId)
  if (!climate || !hasFansToLeaveOn(place)) return null
  const factor = fanFactors(place, context.pressurePa).on
  const coats = trees.map((tree) => limitedCoat(tree, factor, climate.newest?.airTempC ?? null))
  const hours = nightHours(climate, tonight, context.timeZone)
  if (hours.length === 0 || breaksLimits(hours, coats, context.pressurePa)) return null
  return { place, context: withPlaceFactor(context, [place.id], factor, tonight) }
}

/** Fans that a timetable switches off, and that blow harder while they are on. */
export const hasFansToLeaveOn = (place: PlaceFacts): boolean =>
  place.fanHours.length > 0 && place.airSpeedFansOnMps > place.airSpeedFansOffMps

/** The floor with one air speed at some places from one instant to another. */
export function withPlaceFactor(context: FloorContext, placeIds: readonly string[], factor: number, { from, to }: Stretch): FloorContext {
  const placeSpans = new Map(context.placeSpans)
  for (const placeId of placeIds) {
    const spans = context.placeSpans.get(placeId) ?? []
    const left = spans.filter((span) => span.from < from).map((span) => ({ ...span, to: Math.min(span.to, from) }))
    const right = spans.filter((span) => span.to > to).map((span) => ({ ...span, from: Math.max(span.from, to) }))
    placeSpans.set(placeId, [...left, { from, to, placeFactor: factor }, ...right])
  }
  return { ...context, placeSpans }
}

/** The call on a tree's newest coat in another context. */
export const callIn = (tree: DryingTree, context: FloorContext): CoatCall => callOf(tree.facts, tree.newest, context)

/** How much sooner one time is than another, milliseconds; null where either is not in sight. */
export const soonerMs = (later: number | null, sooner: number | null): number | null =>
  later === null || sooner === null ? null : later - sooner

/** A tree hung somewhere else from now on. */
export type Move = { place: PlaceFacts; call: CoatCall }

/** More air than this share above its own place makes a move worth looking at. */
const WORTHWHILE_SHARE = 1.1

/**
 * The place with the most drying until the next opening, if it beats the tree's own and harms nothing: no chill for the coat,
 * no room whose temperature has swung from that of the dip or will, no heat.
 */
export function betterPlace(tree: DryingTree, context: FloorContext, places: readonly PlaceFacts[], tonight: Tonight): Move | null {
  const doseAt = (placeId: string) =>
    doseOverSpans(dryingSpans(context, [{ placeId, since: tonight.from }], tonight.from), tonight.from, tonight.to).likely
  const ownId = placeIdOf(tree)
  const own = doseAt(ownId)
  const ranked = places
    .filter((place) => place.id !== ownId)
    .map((place) => ({ place, dose: doseAt(place.id) }))
    .filter(({ dose }) => dose > own * WORTHWHILE_SHARE)
    .toSorted((a, b) => b.dose - a.dose)
  const best = ranked.find(({ place }) => isSafePlace(tree, place, context, tonight))
  if (!best) return null
  const facts = { ...tree.facts, stays: [...tree.facts.stays, { placeId: best.place.id, since: tonight.from }] }
  return { place: best.place, call: callOf(facts, tree.newest, context) }
}

function isSafePlace(tree: DryingTree, place: PlaceFacts, context: FloorContext, tonight: Tonight): boolean {
  const climate = context.climates.get(place.sensorId)
  if (!climate?.newest || climate.isStale) return false
  const hours = nightHours(climate, tonight, context.timeZone)
  const coat = limitedCoat(tree, highestFactor(context, place.id, tonight), null)
  // Where nobody knows the room at the dip, nobody knows what another room would do.
  if (isNearWax(coat.coatNumber) && coat.airTempAtDipC === null) return false
  const present = { ...climate.newest, from: tonight.from, to: tonight.from }
  return !breaksLimits([present, ...hours], [coat], context.pressurePa)
}

/** What the night does to one tree: hours lost against the recipe's room, and won back by the dryer where one is proposed. */
export type TreeEffect = {
  tree: DryingTree
  lostMs: number | null
  wonBackMs: number | null
  asItStands: Pair
  withDryer: Pair | null
}

/**
 * Effects on every drying tree, most lost first; trees without a reading of their air last, with nothing said of hours.
 *
 * Lost is how much later the likely time is than in the recipe's room from now to the next opening, at the tree's own place: negative
 * where the air is faster.
 */
export function treeEffects(trees: readonly DryingTree[], context: FloorContext, tonight: Tonight, dryer: Dryer | null): TreeEffect[] {
  const recipe = inRecipeRoom(context, tonight)
  return trees
    .map((tree): TreeEffect => {
      const { call } = tree
      if (call.isUnknown) return { tree, lostMs: null, wonBackMs: null, asItStands: { likelyAt: null, safeAt: null }, withDryer: null }
      // A coat that is likely dry already and waits for its safe time loses by that one.
      const timeOf = (other: CoatCall) => (call.isLikelyDry ? other.safeAt : other.likelyAt)
      const isDried = dryer !== null && context.places.get(placeIdOf(tree))?.sensorId === dryer.sensorId
      const dried = isDried ? callIn(tree, dryer.context) : null
      return {
        tree,
        lostMs: soonerMs(timeOf(call), timeOf(callIn(tree, recipe))),
        wonBackMs: dried && soonerMs(timeOf(call), timeOf(dried)),
        asItStands: pairOf(call),
        withDryer: dried && pairOf(dried),
      }
    })
    .toSorted((a, b) => (b.lostMs ?? -Infinity) - (a.lostMs ?? -Infinity) || a.tree.facts.tag.localeCompare(b.tree.facts.tag))
}
