import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { chillFlag, DEFAULT_FLAG_LIMITS, heatFlag } from '@/lib/drying/flags'
import { placeFactor } from '@/lib/drying/place-factor'
import { roomFactor, wetBulbDepressionK } from '@/lib/drying/room-factor'
import { queueRoom } from '@/lib/queue/assemble'
import { steadyTempsC } from '@/lib/room/limits'
import { weighAir } from '@/lib/room/room-what-if'
import { proposalWords } from '@/lib/room/room-what-if-words'
import { mildHumidityPct, thingsToDo } from '@/lib/room/things-to-do'
import {
  betterPlace,
  dryerFor,
  dryingTrees,
  fansLeftOn,
  limitedCoat,
  nightHours,
  placeFactorTonight,
  shelledTrees,
  tonightOf,
  treeEffects,
} from '@/lib/room/tonight'
import type { DerivedTree } from '@/lib/trees/derive'
import { buildContext, buildDerived, buildPlaceFacts, buildRoom, HOUR, NOW, TIME_ZONE, type Air } from './build-room'

const PRESSURE_PA = 101_325
const RUNS = 50
const WEEKDAY_FANS = [1, 2, 3, 4, 5].map((weekday) => ({ weekday, onMinute: 420, offMinute: 1080 }))

type Hour = { from: number; to: number; airTempC: number; relHumidityPct: number }

/** The limits told anew from the flags of the floor, hour by hour, as long as a coat is wet by the later of two calls. */
function harms(tree: DerivedTree, hours: readonly Hour[], factor: number, wetUntil: number): string[] {
  const newest = tree.newest!
  return hours.flatMap((hour) => {
    const { airTempC } = hour
    const heat = heatFlag({ airTempC, airTempAtCoat1C: tree.facts.coats[0]!.airTempC, hasWax: true })
    const isWet = hour.from < wetUntil
    const chill = chillFlag({
      coatNumber: newest.number,
      wetBulbDepressionK: wetBulbDepressionK(hour, PRESSURE_PA),
      roomFactor: roomFactor(hour, PRESSURE_PA),
      placeFactor: factor,
    })
    const isSwing = newest.number <= 2 && newest.airTempC !== null && Math.abs(airTempC - newest.airTempC) > DEFAULT_FLAG_LIMITS.swingK
    return [heat && 'heat', isWet && chill && 'chill', isWet && isSwing && 'swing'].filter((harm) => typeof harm === 'string')
  })
}

const climates = fc.record({
  day: fc.record({ airTempC: fc.double({ min: 17, max: 27, noNaN: true }), relHumidityPct: fc.double({ min: 35, max: 90, noNaN: true }) }),
  coolerBy: fc.double({ min: -2, max: 5, noNaN: true }),
  damperBy: fc.double({ min: -10, max: 30, noNaN: true }),
})
const trees = fc.array(
  fc.record({
    coat: fc.integer({ min: 1, max: 5 }),
    hoursAgo: fc.constantFrom(0.5, 2, 6, 40),
    need: fc.double({ min: 1, max: 12, noNaN: true }),
    /** Against the room by day. */
    dipOffsetK: fc.double({ min: -3.5, max: 2, noNaN: true }),
    placeId: fc.constantFrom('Rack', 'Fan wall'),
  }),
  { minLength: 1, maxLength: 4 },
)
const rooms = fc.record({ climate: climates, other: climates, specs: trees, fanSpeedMps: fc.constantFrom(1, 1.5, 2.5) })
type Room = typeof rooms extends fc.Arbitrary<infer Value> ? Value : never

const airOf =
  ({ day, coolerBy, damperBy }: Room['climate']) =>
  (at: number): Air => {
    const hour = new Date(at).getUTCHours()
    const isNight = hour >= 18 || hour < 7
    return isNight ? { airTempC: day.airTempC - coolerBy, relHumidityPct: Math.min(100, Math.max(20, day.relHumidityPct + damperBy)) } : day
  }

function scene({ climate, other, specs, fanSpeedMps }: Room) {
  const places = [
    buildPlaceFacts('Rack', { airSpeedFansOnMps: fanSpeedMps, airSpeedFansOffMps: 0.2, fanHours: WEEKDAY_FANS }),
    buildPlaceFacts('Fan wall', { airSpeedFansOnMps: fanSpeedMps, airSpeedFansOffMps: fanSpeedMps }),
    buildPlaceFacts('Loft', { sensorId: 2, airSpeedFansOnMps: 2, airSpeedFansOffMps: 2 }),
  ]
  const here = buildRoom(airOf(climate), { days: 4 })
  const loft = buildRoom(airOf(other), { sensorId: 2, days: 4 })
  const context = buildContext({ climates: [here, loft], places })
  const derived = specs.map(({ dipOffsetK, ...spec }, index) =>
    buildDerived(context, { tag: `T-${index + 1}`, airTempAtDipC: climate.day.airTempC + dipOffsetK, ...spec }),
  )
  const tonight = tonightOf(context, true)
  return { places, here, loft, context, derived, drying: dryingTrees(derived), shelled: shelledTrees(derived), tonight }
}

const wetUntil = (tree: DerivedTree, drying: readonly DerivedTree[]) =>
  drying.includes(tree) ? (tree.call!.safeAt ?? Infinity) : -Infinity

/** Runs a property, and holds that the advice was given often enough to mean anything. */
function holds<Value>(arbitrary: fc.Arbitrary<Value>, isAdviceGiven: (value: Value) => boolean, least = 5) {
  let given = 0
  fc.assert(
    fc.property(arbitrary, (value) => {
      if (isAdviceGiven(value)) given += 1
    }),
    { numRuns: RUNS, seed: 7 },
  )
  expect(given).toBeGreaterThanOrEqual(least)
}

describe('no advice harms the wax, whatever the air, the night and the coats', { timeout: 60_000 }, () => {
  it('a dryer', () => {
    holds(rooms, (room) => {
      const { here, context, drying, shelled, tonight } = scene(room)
      const dryer = dryerFor(context, here, shelled, tonight, { lowRhPct: 45, highRhPct: 58 })
      if (!dryer) return false
      const hours = nightHours(here, tonight, TIME_ZONE).map((hour) => ({
        ...hour,
        relHumidityPct: Math.min(hour.relHumidityPct, dryer.targetPct),
      }))
      for (const tree of shelled) expect(harms(tree, hours, placeFactorTonight(tree, context, tonight), wetUntil(tree, drying))).toEqual([])
      return true
    })
  })

  it('fans left on', () => {
    holds(rooms, (room) => {
      const { places, here, context, drying, shelled, tonight } = scene(room)
      const there = shelled.filter((tree) => tree.facts.stays.at(-1)!.placeId === 'Rack')
      if (there.length === 0 || !fansLeftOn(context, places[0]!, there, tonight)) return false
      const factor = placeFactor(room.fanSpeedMps, PRESSURE_PA)
      for (const tree of there) expect(harms(tree, nightHours(here, tonight, TIME_ZONE), factor, wetUntil(tree, drying))).toEqual([])
      return true
    })
  })

  it('another place', () => {
    holds(rooms, (room) => {
      const { places, here, loft, context, drying, tonight } = scene(room)
      const moves = drying.flatMap((tree) => {
        const move = betterPlace(tree, context, places, tonight)
        return move ? [{ tree, move }] : []
      })
      for (const { tree, move } of moves) {
        const climate = move.place.sensorId === 2 ? loft : here
        const hours = [{ ...climate.newest!, from: NOW, to: NOW }, ...nightHours(climate, tonight, TIME_ZONE)]
        expect(harms(tree, hours, placeFactor(move.place.airSpeedFansOnMps, PRESSURE_PA), wetUntil(tree, drying))).toEqual([])
      }
      return moves.length > 0
    })
  })

  const dials = fc.record({
    until: fc.constantFrom('closing' as const, 'opening' as const),
    airTempC: fc.option(fc.double({ min: 17, max: 29, noNaN: true }), { nil: undefined, freq: 1 }),
    relHumidityPct: fc.option(fc.integer({ min: 38, max: 70 }), { nil: undefined, freq: 4 }),
    airSpeedMps: fc.option(fc.double({ min: 0.5, max: 2.5, noNaN: true }), { nil: undefined, freq: 1 }),
  })

  it('what the dials propose', () => {
    holds(fc.tuple(rooms, dials), ([room, choice]) => {
      const { places, here, context, derived, drying, shelled, tonight } = scene(room)
      const own = places.filter((place) => place.sensorId === 1)
      const answer = weighAir({ context, trees: derived, climate: here, places: own, hasHours: true }, choice)
      const turned = { choice, relHumidityNowPct: here.newest!.relHumidityPct, placeNames: new Map<string, string>() }
      const proposal = proposalWords(turned, answer, { tempUnit: 'degC', timeZone: TIME_ZONE })
      const stretch = { from: NOW, to: choice.until === 'closing' ? NOW + HOUR : tonight.to }
      const hours = nightHours(here, stretch, TIME_ZONE).map((hour) => ({
        ...hour,
        ...(choice.airTempC === undefined ? {} : { airTempC: choice.airTempC }),
        ...(choice.relHumidityPct === undefined ? {} : { relHumidityPct: choice.relHumidityPct }),
      }))
      for (const tree of shelled) {
        const after = answer.trees.find(({ treeId }) => treeId === tree.facts.id)
        const wet = after ? Math.max(wetUntil(tree, drying), after.after?.safeAt ?? Infinity) : -Infinity
        const factor =
          choice.airSpeedMps === undefined
            ? placeFactorTonight(tree, context, { ...tonight, ...stretch })
            : placeFactor(choice.airSpeedMps, PRESSURE_PA)
        const found = new Set(harms(tree, hours, factor, wet))
        expect(proposal === null || found.size === 0).toBe(true)
        // And no harm goes unsaid where none is proposed.
        const said = answer.harms.flatMap(({ harm, tags }) =>
          tags.includes(tree.facts.tag) && harm.code !== 'too dry' ? [harm.code === 'too fast' ? 'chill' : harm.code] : [],
        )
        expect(new Set(said)).toEqual(found)
      }
      return proposal !== null
    })
  })

  it('a temperature to hold, a humidity to raise', () => {
    holds(rooms, (room) => {
      const { here, context, drying, shelled, tonight } = scene(room)
      const coats = shelled.map((tree) => limitedCoat(tree, placeFactorTonight(tree, context, tonight), null))
      const effects = treeEffects(drying, context, tonight, null)
      const things = thingsToDo({
        rooms: [queueRoom(here, { name: 'Room', kind: 'logger' }, PRESSURE_PA)],
        effects,
        dryer: null,
        fans: [],
        sensorOf: () => 1,
        coatsOf: () => coats,
        placeFactorOf: (effect) => placeFactorTonight(effect.tree, context, tonight),
        tonight,
        now: NOW,
        timeZone: TIME_ZONE,
        tempUnit: 'degC',
        pressurePa: PRESSURE_PA,
      })
      const steady = steadyTempsC(coats)
      for (const airTempC of steady ? [steady.lowC, steady.highC] : []) {
        // Damp air, in which nothing chills: what is left are heat and swing.
        const hours = [{ from: NOW, to: NOW + HOUR, airTempC, relHumidityPct: 100 }]
        for (const tree of shelled) {
          // Floating point at the very limit.
          const inside = hours.map((hour) => ({ ...hour, airTempC: airTempC + (airTempC === steady!.lowC ? 1e-9 : -1e-9) }))
          expect(harms(tree, inside, 1, wetUntil(tree, drying))).toEqual([])
        }
      }
      const nearWax = effects.filter(({ tree }) => tree.newest.number <= 2).map(({ tree }) => placeFactorTonight(tree, context, tonight))
      const { airTempC } = here.newest!
      const isRaised = things.some((thing) => thing.title.startsWith('Raise'))
      const air = { airTempC, relHumidityPct: isRaised ? mildHumidityPct(airTempC, Math.max(...nearWax), PRESSURE_PA)! : 100 }
      const chill = {
        coatNumber: 1,
        wetBulbDepressionK: wetBulbDepressionK(air, PRESSURE_PA),
        roomFactor: roomFactor(air, PRESSURE_PA),
        placeFactor: Math.max(0, ...nearWax),
      }
      expect(chillFlag(chill)).toBeNull()
      return steady !== null
    })
  })
})
