import { millisecondsInDay } from 'date-fns/constants'
import { hourStartOf } from '@/lib/drying/dose-hours'
import { loadClimateRows } from '@/lib/queries/load-climate'
import { loadFanSwitches, type FanSwitches } from '@/lib/queries/load-fan-switches'
import { loadFacts, type TreeSelection } from '@/lib/queries/load-facts'
import { loadFoundry, type FoundryFacts } from '@/lib/queries/load-foundry'
import { buildClimate, type ClimateRows, type RoomClimate } from '@/lib/room/climate'
import { shiftsFrom } from '@/lib/schedule/shifts'
import { callOf, LONGEST_WINDOW_MS } from '@/lib/trees/assess'
import { deriveTree, type DerivedTree } from '@/lib/trees/derive'
import { clockStart, type TreeFacts } from '@/lib/trees/facts'
import { floorContext, withClimates, type FloorContext } from '@/lib/trees/spans'

export type Floor = { foundry: FoundryFacts; context: FloorContext; trees: DerivedTree[]; fanSwitches: FanSwitches }

/** The forecast looks back a fortnight, so the hours of that time are always at hand. */
const FORECAST_HISTORY_MS = 14 * millisecondsInDay

/**
 * The shell room at one moment: the foundry, its air, and the chosen trees derived.
 *
 * Costs by the trees on the floor and the hours they have hung, never by the readings or the history behind them.
 */
export async function loadFloor({ now, trees: selection }: { now: number; trees: TreeSelection }): Promise<Floor> {
  const [foundry, facts] = await Promise.all([loadFoundry(), loadFacts(selection)])
  return deriveFloor(foundry, facts, now)
}

/** Derives trees whose facts are at hand; commands use it for facts they have just read inside their transaction. */
export async function deriveFloor(
  foundry: FoundryFacts,
  facts: readonly TreeFacts[],
  now: number,
  extraInstants: readonly number[] = [],
): Promise<Floor> {
  const starts = facts.flatMap((tree) => tree.coats.slice(-1).map(clockStart))
  const oldest = Math.min(now - FORECAST_HISTORY_MS, ...starts, ...extraInstants)
  const from = Math.max(oldest, now - LONGEST_WINDOW_MS)
  const sensorIds = [
    ...new Set([
      ...foundry.places.flatMap(({ sensorId, formerAirs }) => [sensorId, ...formerAirs.map((air) => air.sensorId)]),
      ...foundry.sensors.map(({ id }) => id),
    ]),
  ]
  // An hour before each instant too: the damp flag and the room at the dip look back from it.
  const seenAt = facts.flatMap((tree) => (tree.coats.at(-1)?.evidence ?? []).map(({ takenAt }) => takenAt))
  const needed = new Set(
    [...starts, ...seenAt, ...extraInstants, now]
      .flatMap((at) => [hourStartOf(at), hourStartOf(at) - 3_600_000])
      .filter((at) => at >= from - 2 * 3_600_000),
  )

  const fanSwitches = await loadFanSwitches(hourStartOf(from))
  // A dose is split to the minute where a person has moved the tree or switched its fans.
  for (const at of facts.flatMap((tree) => splitsOf(tree, foundry, fanSwitches))) {
    if (at >= from && at <= now) needed.add(hourStartOf(at))
  }

  const rowsOf = new Map<number, ClimateRows>()
  const loadClimates = () =>
    Promise.all(
      sensorIds.map(async (sensorId): Promise<RoomClimate> => {
        const rows = await loadClimateRows(sensorId, from, now, [...needed], rowsOf.get(sensorId))
        rowsOf.set(sensorId, rows)
        return buildClimate(rows, { now, timeZone: foundry.timeZone })
      }),
    )

  // Twice: the hourly table finds the hours in which coats came dry, their exact readings then give the minute.
  const coarse = floorContext({
    now,
    timeZone: foundry.timeZone,
    pressurePa: foundry.pressurePa,
    recessFactors: foundry.recessFactors,
    climates: await loadClimates(),
    places: foundry.places,
    fanSwitches,
    shifts: shiftsFrom(now, foundry.calendar, foundry.timeZone),
    from: hourStartOf(from),
  })
  const before = needed.size
  for (const tree of facts) {
    const newest = tree.coats.at(-1)
    if (!newest || tree.releasedAt !== null || tree.scrappedAt !== null) continue
    const call = callOf(tree, newest, coarse)
    for (const at of [call.earliestAt, call.likelyAt, call.safeAt]) {
      if (at === null || at > now) continue
      needed.add(hourStartOf(at))
      needed.add(hourStartOf(at) - 3_600_000)
    }
  }
  const context = needed.size > before ? withClimates(coarse, await loadClimates()) : coarse
  return { foundry, context, fanSwitches, trees: facts.map((tree) => deriveTree(tree, context, foundry.calendar)) }
}

/** Moments since the dip of the newest coat at which somebody gave it another air. */
function splitsOf({ coats, stays }: TreeFacts, { places }: FoundryFacts, fanSwitches: FanSwitches): number[] {
  const newest = coats.at(-1)
  if (!newest) return []
  const start = clockStart(newest)
  const hungAt = new Set([newest.placeId, ...stays.filter(({ since }) => since > start).map(({ placeId }) => placeId)])
  const atPlaces = places
    .filter(({ id }) => hungAt.has(id))
    .flatMap(({ id, formerAirs }) => [...formerAirs.map(({ until }) => until), ...(fanSwitches.get(id) ?? []).map(({ at }) => at)])
  return [...stays.map(({ since }) => since), ...atPlaces].filter((at) => at > start)
}
