import { TZDate } from '@date-fns/tz'
import { millisecondsInDay, millisecondsInHour } from 'date-fns/constants'
import { QueryTypes } from 'sequelize'
import type { Clock } from '@/lib/core/clock'
import type { TempUnit } from '@/lib/format/units'
import { loadFloor, type Floor } from '@/lib/queries/floor'
import { loadReadingsInRange } from '@/lib/queries/load-climate'
import { loadSensorNotes } from '@/lib/queries/sensor-notes'
import { placeFansOf, queueRoom, queueTree } from '@/lib/queue/assemble'
import { speedWords } from '@/lib/room/place-air'
import { roomHeadline, treeAdvice } from '@/lib/room/room-words'
import type { CoatBar, DriedCoat, RoomPage } from '@/lib/room/room-contract'
import { AHEAD_HOURS, BACK_HOURS, exactFrom, roomSeries } from '@/lib/room/series'
import { closedStretches, shiftSpeeds } from '@/lib/room/shift-speeds'
import { LEAST_GAIN_MS, thingsToDo } from '@/lib/room/things-to-do'
import {
  betterPlace,
  callIn,
  dryerFor,
  dryingTrees,
  fansLeftOn,
  placeFactorTonight,
  soonerMs,
  tonightOf,
  treeEffects,
  type Dryer,
  type DryingTree,
  type Tonight,
  type TreeEffect,
} from '@/lib/room/tonight'
import { shiftsFrom } from '@/lib/schedule/shifts'
import { airOf } from '@/lib/trees/spans'
import { database } from '@/models'

const MOST_BARS = 12
const MOST_DRIED = 120

type RoomInput = {
  /** The room to draw; the one in which most trees dry where it is not named, or not there. */
  sensorId: number | null
  tempUnit: TempUnit
  clock: Clock
}

/**
 * The Room page: what the air means for the trees, and one room's air over two days.
 *
 * Costs by the trees on the floor and the hours of a fortnight, never by the readings behind them.
 */
export async function loadRoomPage({ sensorId, tempUnit, clock }: RoomInput): Promise<RoomPage> {
  const now = clock.now()
  const floor = await loadFloor({ now, trees: { on: 'floor' } })
  const { foundry, context, fanSwitches } = floor
  const { timeZone, pressurePa } = foundry
  const places = foundry.places.filter((place) => !place.isRetired)
  const sensorOf = (tree: DryingTree) => context.places.get(tree.facts.stays.at(-1)?.placeId ?? '')?.sensorId
  const rooms = foundry.sensors.flatMap((sensor) => {
    const climate = context.climates.get(sensor.id)
    return climate ? [queueRoom(climate, sensor, pressurePa)] : []
  })

  const drying = dryingTrees(floor.trees)
  const tonight = tonightOf(context, foundry.calendar.hours.length > 0)
  const dryer = bestDryer(floor, drying, tonight, sensorOf)
  const effects = treeEffects(drying, context, tonight, dryer)
  const fans = places
    .flatMap((place) => {
      const there = drying.filter((tree) => tree.facts.stays.at(-1)?.placeId === place.id && !tree.call.isUnknown)
      const fansOn = there.length === 0 ? null : fansLeftOn(context, place, there, tonight)
      return fansOn ? [{ fansOn, gainMs: gainOf(there, (tree) => callIn(tree, fansOn.context)) }] : []
    })
    .toSorted((a, b) => b.gainMs - a.gainMs)

  const room = rooms.find((candidate) => candidate.sensorId === sensorId) ?? mostUsed(rooms, drying, sensorOf)
  const climate = room && context.climates.get(room.sensorId)
  const from = now - BACK_HOURS * millisecondsInHour
  const to = now + AHEAD_HOURS * millisecondsInHour
  // From three days back, so that the shift or night in which the charts begin is a whole one.
  const shifts = shiftsFrom(from - 3 * millisecondsInDay, foundry.calendar, timeZone)
  const since = mondayOf(now, timeZone)
  const [notes, readings, dried] = await Promise.all([
    loadSensorNotes({ now }),
    room ? loadReadingsInRange(room.sensorId, exactFrom(now), now) : [],
    room ? driedCoats(floor, room.sensorId, since) : [],
  ])
  const here = room ? places.filter((place) => place.sensorId === room.sensorId) : []
  const coat1Temps = floor.trees.flatMap((tree) => {
    const tempC = tree.facts.coats[0]?.airTempC
    const isHere = context.places.get(tree.facts.stays.at(-1)?.placeId ?? '')?.sensorId === room?.sensorId
    return isHere && tempC !== null && tempC !== undefined ? [tempC] : []
  })

  return {
    now,
    timeZone,
    band: foundry.band,
    pressurePa,
    headline: roomHeadline({ rooms, effects, tonight, now, timeZone }),
    dryerPct: dryer?.targetPct ?? null,
    wonBackMs: effects.reduce((sum, effect) => sum + (effect.wonBackMs ?? 0), 0),
    placesNow: places.map((place) => {
      const fans = placeFansOf(place, context, fanSwitches)
      const treeCount = floor.trees.filter(({ facts }) => facts.stays.at(-1)?.placeId === place.id).length
      return { id: place.id, name: place.name, treeCount, speed: speedWords(place, fans?.isOn ?? false), fans }
    }),
    rows: effects.map((effect) => ({
      tree: queueTree(effect.tree, context.places),
      lostMs: effect.lostMs,
      wonBackMs: effect.wonBackMs,
      asItStands: effect.tree.call.isUnknown ? null : effect.asItStands,
      withDryer: effect.withDryer,
      toDo: treeAdvice({
        effect,
        move: effect.tree.call.isUnknown ? null : betterPlace(effect.tree, context, places, tonight),
        isTypedOnly: context.places.get(effect.tree.facts.stays.at(-1)?.placeId ?? '')?.isTypedOnly ?? false,
        now,
        timeZone,
        shifts: context.shifts,
      }),
    })),
    things: thingsToDo({
      rooms,
      effects,
      dryer,
      fans,
      sensorOf: (effect) => sensorOf(effect.tree),
      placeFactorOf: (effect) => placeFactorTonight(effect.tree, context, tonight),
      tonight,
      now,
      timeZone,
      tempUnit,
      pressurePa,
    }),
    rooms,
    notes,
    room: room ?? null,
    points: climate ? roomSeries(climate, readings, { now, timeZone, pressurePa }) : [],
    from,
    to,
    closed: foundry.calendar.hours.length > 0 ? closedStretches(shifts, from, to) : [],
    bars: room ? barsOf(effects, (effect) => sensorOf(effect.tree) === room.sensorId) : [],
    shiftSpeeds:
      climate && foundry.calendar.hours.length > 0 ? shiftSpeeds(climate.curve, shifts, { from, to: tonight.to, now, timeZone }) : [],
    dried: { since, coats: dried.slice(0, MOST_DRIED), isCut: dried.length > MOST_DRIED },
    places: here.map((place) => ({ name: place.name, airSpeedMps: place.airSpeedFansOnMps })),
    coolestCoat1C: coat1Temps.length > 0 ? Math.min(...coat1Temps) : null,
  }
}

function gainOf(trees: readonly DryingTree[], callOf: (tree: DryingTree) => DryingTree['call']): number {
  return trees.reduce((sum, tree) => sum + (soonerMs(tree.call.likelyAt, callOf(tree).likelyAt) ?? 0), 0)
}

/** The room in which drying the air wins most, if it wins anything worth a machine. */
function bestDryer(
  { context, foundry }: Floor,
  drying: readonly DryingTree[],
  tonight: Tonight,
  sensorOf: (tree: DryingTree) => number | undefined,
): Dryer | null {
  const dryers = [...context.climates.values()].flatMap((climate) => {
    const there = drying.filter((tree) => sensorOf(tree) === climate.sensorId && !tree.call.isUnknown)
    const dryer = there.length === 0 ? null : dryerFor(context, climate, there, tonight, foundry.band)
    return dryer ? [{ dryer, gainMs: gainOf(there, (tree) => callIn(tree, dryer.context)) }] : []
  })
  const best = dryers.toSorted((a, b) => b.gainMs - a.gainMs)[0]
  return best && best.gainMs >= LEAST_GAIN_MS ? best.dryer : null
}

function mostUsed(
  rooms: RoomPage['rooms'],
  drying: readonly DryingTree[],
  sensorOf: (tree: DryingTree) => number | undefined,
): RoomPage['room'] {
  const count = (room: RoomPage['rooms'][number]) => drying.filter((tree) => sensorOf(tree) === room.sensorId).length
  return rooms.toSorted((a, b) => count(b) - count(a) || a.sensorId - b.sensorId)[0] ?? null
}

function barsOf(effects: readonly TreeEffect[], isHere: (effect: TreeEffect) => boolean): CoatBar[] {
  return effects
    .filter((effect) => isHere(effect))
    .map(({ tree, asItStands }) => ({
      tag: tree.facts.tag,
      coatNumber: tree.newest.number,
      dippedAt: tree.newest.dippedAt,
      ...asItStands,
    }))
    .toSorted((a, b) => (a.likelyAt ?? Infinity) - (b.likelyAt ?? Infinity))
    .slice(0, MOST_BARS)
}

/** Local midnight at the beginning of this week. */
function mondayOf(now: number, timeZone: string): number {
  const local = new TZDate(now, timeZone)
  return new TZDate(local.getFullYear(), local.getMonth(), local.getDate() - ((local.getDay() + 6) % 7), 0, 0, 0, 0, timeZone).getTime()
}

/** Coats that were dipped over since, and those that came dry and wait, of trees that hung in this room's air; newest first. */
async function driedCoats({ context, trees }: Floor, sensorId: number, since: number): Promise<DriedCoat[]> {
  const covered = await database.query<Omit<DriedCoat, 'isDemo'> & { isDemo: number }>(
    `SELECT t.tag, t.is_demo AND NOT (SELECT is_demo FROM foundry) AS isDemo, c.number AS coatNumber, p.name AS placeName, c.dipped_at AS dippedAt, c.covered_at AS coveredAt,
            c.moisture_ratio_at_redip AS moistureRatio, c.mean_rel_humidity_pct AS meanRelHumidityPct
       FROM coats c JOIN trees t ON t.id = c.tree_id JOIN places p ON p.id = c.place_id
      WHERE c.withdrawn_at IS NULL AND c.covered_at >= :since
        -- A place may have had another sensor then, as airOf has it.
        AND coalesce((SELECT f.sensor_id FROM former_airs f WHERE f.place_id = p.id AND f.until > c.covered_at ORDER BY f.until LIMIT 1),
                     p.sensor_id) = :sensorId
      ORDER BY c.covered_at DESC LIMIT ${MOST_DRIED + 1}`,
    { type: QueryTypes.SELECT, replacements: { since, sensorId } },
  )
  const waiting = trees.flatMap(({ facts, newest, call }): DriedCoat[] => {
    const place = context.places.get(facts.stays.at(-1)?.placeId ?? '')
    if (!newest || !call || !place || call.guardReachedAt === null || call.guardReachedAt < since) return []
    if (airOf(place, call.guardReachedAt).sensorId !== sensorId) return []
    return [
      {
        tag: facts.tag,
        isDemo: facts.isDemo,
        coatNumber: newest.number,
        placeName: place.name,
        dippedAt: newest.dippedAt,
        coveredAt: null,
        moistureRatio: null,
        meanRelHumidityPct: null,
      },
    ]
  })
  return [...waiting, ...covered.map((coat) => ({ ...coat, isDemo: coat.isDemo === 1 }))]
}
