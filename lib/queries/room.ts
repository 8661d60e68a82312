import { millisecondsInDay, millisecondsInHour } from 'date-fns/constants'
import { QueryTypes } from 'sequelize'
import type { Clock } from '@/lib/core/clock'
import type { TempUnit } from '@/lib/format/units'
import { loadBandHours } from '@/lib/queries/band-hours'
import { loadClimateSpans } from '@/lib/queries/climate-spans'
import { loadFloor, type Floor } from '@/lib/queries/floor'
import { loadReadingsInRange } from '@/lib/queries/load-climate'
import { loadSensorNotes } from '@/lib/queries/sensor-notes'
import { placeFansOf, queueRoom, queueTree } from '@/lib/queue/assemble'
import { speedWords } from '@/lib/room/place-air'
import { roomHeadline, treeAdvice } from '@/lib/room/room-words'
import type { BandTable, CoatBar, DriedCoat, RoomPage } from '@/lib/room/room-contract'
import { dayPoint, hourSeries } from '@/lib/room/climate-days'
import type { RoomClimate } from '@/lib/room/climate'
import { rangeEnds, todayAndMonday, yearOfDays, type RoomRange } from '@/lib/room/range'
import { BACK_HOURS, exactFrom, roomSeries, type RoomPoint } from '@/lib/room/series'
import { closedStretches, shiftSpeeds } from '@/lib/room/shift-speeds'
import { LEAST_GAIN_MS, thingsToDo } from '@/lib/room/things-to-do'
import {
  betterPlace,
  callIn,
  closingOf,
  dryerFor,
  dryingTrees,
  fansLeftOn,
  hasFansToLeaveOn,
  limitedCoat,
  placeFactorTonight,
  placeIdOf,
  shelledTrees,
  soonerMs,
  tonightOf,
  treeEffects,
  type Dryer,
  type DryingTree,
  type ShelledTree,
  type Tonight,
  type TreeEffect,
} from '@/lib/room/tonight'
import { shiftsFrom } from '@/lib/schedule/shifts'
import type { DerivedTree } from '@/lib/trees/derive'
import { airOf } from '@/lib/trees/spans'
import { database } from '@/models'

const MOST_BARS = 12
const MOST_DRIED = 120

type RoomInput = {
  /** The room to draw; the one in which most trees dry where it is not named, or not there. */
  sensorId: number | null
  range: RoomRange
  tempUnit: TempUnit
  clock: Clock
}

/**
 * The Room page: what the air means for the trees, and one room's air over two days, a fortnight or a year.
 *
 * Costs by the trees on the floor and the hours of a fortnight, for a year by its hours; never by the readings behind them.
 */
export async function loadRoomPage({ sensorId, range, tempUnit, clock }: RoomInput): Promise<RoomPage> {
  const now = clock.now()
  const floor = await loadFloor({ now, trees: { on: 'floor' } })
  const { foundry, context, fanSwitches } = floor
  const { timeZone, pressurePa } = foundry
  const places = foundry.places.filter((place) => !place.isRetired)
  const sensorOf = (tree: DerivedTree) => context.places.get(placeIdOf(tree))?.sensorId
  const rooms = foundry.sensors.flatMap((sensor) => {
    const climate = context.climates.get(sensor.id)
    return climate ? [queueRoom(climate, sensor, pressurePa)] : []
  })

  const drying = dryingTrees(floor.trees)
  const shelled = shelledTrees(floor.trees)
  const tonight = tonightOf(context, foundry.calendar.hours.length > 0)
  const dryer = bestDryer(floor, drying, shelled, tonight, sensorOf)
  const effects = treeEffects(drying, context, tonight, dryer)
  const fans = places
    .flatMap((place) => {
      const there = drying.filter((tree) => placeIdOf(tree) === place.id && !tree.call.isUnknown)
      const inAir = shelled.filter((tree) => placeIdOf(tree) === place.id)
      const fansOn = there.length === 0 ? null : fansLeftOn(context, place, inAir, tonight)
      return fansOn ? [{ fansOn, gainMs: gainOf(there, (tree) => callIn(tree, fansOn.context)) }] : []
    })
    .toSorted((a, b) => b.gainMs - a.gainMs)

  const room = rooms.find((candidate) => candidate.sensorId === sensorId) ?? mostUsed(rooms, drying, sensorOf)
  const climate = room && context.climates.get(room.sensorId)
  const { from, to } = rangeEnds(range, now, timeZone)
  const dayBack = now - BACK_HOURS * millisecondsInHour
  // From three days back, so that the shift or night in which the charts begin is a whole one.
  const shifts = shiftsFrom(dayBack - 3 * millisecondsInDay, foundry.calendar, timeZone)
  const since = todayAndMonday(now, timeZone).monday
  const [notes, points, bandTable, dried] = await Promise.all([
    loadSensorNotes({ now }),
    climate ? drawnPoints(climate, range, floor) : [],
    loadBandTable(floor, rooms, range),
    room ? driedCoats(floor, room.sensorId, since) : [],
  ])
  const here = room ? places.filter((place) => place.sensorId === room.sensorId) : []
  const coat1Temps = floor.trees.flatMap((tree) => {
    const tempC = tree.facts.coats[0]?.airTempC
    const isHere = context.places.get(placeIdOf(tree))?.sensorId === room?.sensorId
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
      const stand = placeFansOf(place, context, fanSwitches)
      const treeCount = floor.trees.filter(({ facts }) => facts.stays.at(-1)?.placeId === place.id).length
      return { id: place.id, name: place.name, treeCount, speed: speedWords(place, stand?.isOn ?? false), fans: stand }
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
      coatsOf: (id) =>
        shelled
          .filter((tree) => sensorOf(tree) === id)
          .map((tree) => limitedCoat(tree, placeFactorTonight(tree, context, tonight), context.climates.get(id)?.newest?.airTempC ?? null)),
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
    range,
    points,
    from,
    to,
    // Nights of a year are thinner than a line.
    closed:
      foundry.calendar.hours.length > 0 && range !== '1y' ? closedStretches(shiftsFrom(from, foundry.calendar, timeZone), from, to) : [],
    closesAt: closingOf(context, foundry.calendar.hours.length > 0),
    opensAt: tonight.to,
    bars: room ? barsOf(effects, (effect) => sensorOf(effect.tree) === room.sensorId) : [],
    shiftSpeeds:
      climate && foundry.calendar.hours.length > 0
        ? shiftSpeeds(climate.curve, shifts, { from: dayBack, to: tonight.to, now, timeZone })
        : [],
    bandTable,
    dried: { since, coats: dried.slice(0, MOST_DRIED), isCut: dried.length > MOST_DRIED },
    places: here.map((place) => ({
      id: place.id,
      name: place.name,
      airSpeedMps: place.airSpeedFansOnMps,
      hasFansToLeaveOn: hasFansToLeaveOn(place),
    })),
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
  shelled: readonly ShelledTree[],
  tonight: Tonight,
  sensorOf: (tree: DerivedTree) => number | undefined,
): Dryer | null {
  const dryers = [...context.climates.values()].flatMap((climate) => {
    const isThere = (tree: DerivedTree) => sensorOf(tree) === climate.sensorId
    const there = drying.filter((tree) => isThere(tree) && !tree.call.isUnknown)
    const dryer = there.length === 0 ? null : dryerFor(context, climate, shelled.filter(isThere), tonight, foundry.band)
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

/** Points of the charts: two days with their forecast, a fortnight of hours, or a year of days. */
async function drawnPoints(climate: RoomClimate, range: RoomRange, { foundry, context }: Floor): Promise<RoomPoint[]> {
  const { now } = context
  const { timeZone, pressurePa, band } = foundry
  switch (range) {
    case '48h':
      return roomSeries(climate, await loadReadingsInRange(climate.sensorId, exactFrom(now), now), { now, timeZone, pressurePa })
    case '14d':
      return hourSeries(climate, rangeEnds(range, now, timeZone), pressurePa)
    case '1y':
      return (await loadClimateSpans(climate.sensorId, yearOfDays(now, timeZone), band)).map((day) => dayPoint(day, pressurePa))
  }
}

async function loadBandTable({ foundry, context }: Floor, rooms: RoomPage['rooms'], range: RoomRange): Promise<BandTable> {
  const { now, timeZone } = context
  const { today, monday } = todayAndMonday(now, timeZone)
  const hasRange = range !== '48h'
  const froms = [today, monday, ...(hasRange ? [rangeEnds(range, now, timeZone).from] : [])]
  const table = await Promise.all(
    rooms.map(async ({ sensorId, sensorName }) => {
      const climate = context.climates.get(sensorId)
      const [ofToday = null, week = null, ofRange = null] = climate ? await loadBandHours(climate, froms, { band: foundry.band, now }) : []
      return { sensorId, sensorName, today: ofToday, week, range: ofRange }
    }),
  )
  return { monday, hasRange, rooms: table }
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
