import { describe, expect, it } from 'vitest'
import { roomFactor } from '@/lib/drying/room-factor'
import { roughDuration } from '@/lib/format/duration'
import type { QueueRoom } from '@/lib/queue/contract'
import { queueRoom } from '@/lib/queue/assemble'
import { roomHeadline, treeAdvice } from '@/lib/room/room-words'
import { mildHumidityPct, thingsToDo } from '@/lib/room/things-to-do'
import { betterPlace, dryerFor, dryingTrees, fansLeftOn, limitedCoat, placeFactorTonight, tonightOf, treeEffects } from '@/lib/room/tonight'
import { shiftsFrom } from '@/lib/schedule/shifts'
import {
  buildContext,
  buildDerived,
  buildPlaceFacts,
  buildRoom,
  HOUR,
  MINUTE,
  NOW,
  RECIPE_AIR,
  TIME_ZONE,
  WEEK,
  type Air,
  type TreeSpec,
} from './build-room'

const DAMP: Air = { airTempC: 20, relHumidityPct: 78 }
const BAND = { lowRhPct: 45, highRhPct: 58 }
const plain = (text: string) => text.replaceAll('\u00A0', ' ')

type Scene = {
  airAt?: (at: number) => Air
  trees?: TreeSpec[]
  places?: ReturnType<typeof buildPlaceFacts>[]
  silentHours?: number
  now?: number
  kind?: 'logger' | 'wall hygrometer'
}

/** The floor of a test, weighed as the page weighs it. */
function scene({
  airAt = () => RECIPE_AIR,
  trees = [{}],
  places = [buildPlaceFacts('Rack')],
  silentHours = 0,
  now = NOW,
  kind = 'logger',
}: Scene = {}) {
  const climate = buildRoom(airAt, { silentHours, now })
  const context = buildContext({ climates: [climate], places, now })
  const drying = dryingTrees(trees.map((spec, index) => buildDerived(context, { tag: `T-${index + 1}`, ...spec })))
  const tonight = tonightOf(context, true)
  const dryer = dryerFor(context, climate, drying, tonight, BAND)
  const effects = treeEffects(drying, context, tonight, dryer)
  const rooms = [queueRoom(climate, { name: 'Shell room logger', kind }, 101_325)]
  const coats = drying.map((tree) => limitedCoat(tree, 1, null))
  const words = { now, timeZone: TIME_ZONE }
  return {
    context,
    coats,
    effects,
    rooms,
    headline: roomHeadline({ rooms, effects, tonight, ...words }),
    advice: effects.map((effect) =>
      plain(
        treeAdvice({
          effect,
          move: effect.tree.call.isUnknown ? null : betterPlace(effect.tree, context, places, tonight),
          isTypedOnly: kind === 'wall hygrometer',
          shifts: shiftsFrom(now, WEEK, TIME_ZONE),
          ...words,
        }),
      ),
    ),
    things: (fans: Parameters<typeof thingsToDo>[0]['fans'] = []) =>
      thingsToDo({
        rooms,
        effects,
        dryer,
        fans,
        sensorOf: () => 1,
        coatsOf: () => coats,
        placeFactorOf: (effect) => placeFactorTonight(effect.tree, context, tonight),
        tonight,
        tempUnit: 'degC',
        pressurePa: 101_325,
        ...words,
      }).map((thing) => ({
        title: plain(thing.title),
        text: plain(thing.text),
      })),
    tonight,
  }
}

describe('the headline', () => {
  it('says what tonight takes from the trees together, to five minutes', () => {
    const { headline, effects } = scene({ airAt: () => DAMP, trees: [{ need: 8 }, { need: 5 }] })
    const together = effects.reduce((sum, effect) => sum + effect.lostMs!, 0)
    expect(headline.title).toBe(`Tonight takes ${roughDuration(together)} from the trees`)
    expect(headline.line).toBe('against the recipe’s room, 2 trees together.')
  })

  it('says what it gives where the air is faster', () => {
    expect(scene({ airAt: () => ({ airTempC: 23, relHumidityPct: 42 }), trees: [{ need: 8 }] }).headline.title).toMatch(
      /^Tonight gives the tree \d/,
    )
  })

  it('says that the room dries at recipe speed', () => {
    expect(scene().headline).toEqual({
      title: 'The room dries at recipe speed',
      line: 'Nothing is lost tonight against the recipe’s room, one tree.',
    })
  })

  it('says that nothing dries', () => {
    const { headline } = scene({ trees: [] })
    expect(headline).toEqual({ title: 'Nothing is drying now', line: 'Shell room logger: Good, 100 % of recipe speed' })
  })

  it('says that the air is not known, and since when', () => {
    const { headline } = scene({ silentHours: 4 })
    expect(headline).toEqual({ title: 'The air is not known', line: 'No reading since 12:00: every coat stays unknown until one comes.' })
  })

  it('says that nobody reads the air where there is no sensor', () => {
    const { effects, tonight } = scene({ trees: [] })
    expect(roomHeadline({ rooms: [], effects, tonight, now: NOW, timeZone: TIME_ZONE }).title).toBe('Nobody reads the air yet')
  })

  it('names the opening over a weekend', () => {
    const now = Date.parse('2026-10-16T15:00:00Z')
    expect(scene({ now, airAt: () => DAMP, trees: [{ need: 8 }] }).headline.title).toMatch(
      /^Until Mon 07:00 the air takes \d.* from the tree$/,
    )
  })
})

describe('what to do with a tree', () => {
  it.each<[string, Scene, string]>([
    ['dry before the doors close', { trees: [{ hoursAgo: 3.5 }] }, 'Dip 4 in this shift.'],
    ['dry in the night', { trees: [{ need: 8 }] }, 'Dip 4 at opening, Wed 07:00.'],
    ['a last coat', { trees: [{ coat: 5, hoursAgo: 4 }] }, 'Look it over at opening, Wed 07:00.'],
    ['the seal to come', { trees: [{ coat: 4, need: 8 }] }, 'Dip 5, seal at opening, Wed 07:00.'],
    ['dry in the next shift', { trees: [{ need: 20 }] }, 'Dip 4 in the shift from Wed 07:00.'],
    ['a silent logger', { silentHours: 4 }, 'Check its sensor; until then confirm by touch.'],
    ['a hygrometer nobody read', { silentHours: 4, kind: 'wall hygrometer' }, 'Read the hygrometer, then confirm by touch.'],
    ['a held tree', { trees: [{ hold: { id: 'h', reason: 'Crack', by: 'Ines', at: NOW } }] }, 'Held: lift the hold before the next act.'],
    [
      'a chilled face coat',
      { airAt: () => ({ airTempC: 24, relHumidityPct: 36 }), trees: [{ coat: 1, airTempAtDipC: 24 }] },
      'Take air off it: coat 1 chills the wax.',
    ],
  ])('%s', (_what, given, words) => {
    expect(scene(given).advice).toEqual([words])
  })

  const calm = buildPlaceFacts('Rack', { airSpeedFansOnMps: 0.1, airSpeedFansOffMps: 0.1 })
  const windy = buildPlaceFacts('Fan rack', { airSpeedFansOnMps: 1.5, airSpeedFansOffMps: 1.5 })

  it('hang it in more air, where that brings an earlier dip', () => {
    expect(scene({ places: [calm, windy], trees: [{ need: 9 }] }).advice[0]).toMatch(
      /^Hang it at Fan rack, in more air: likely 23:\d\d, safe Wed 02:\d\d\.$/,
    )
  })

  it('leave it, where both places are dry by the opening', () => {
    expect(scene({ places: [calm, windy], trees: [{ need: 5 }] }).advice).toEqual(['Dip 4 at opening, Wed 07:00.'])
  })
})

describe('things to do', () => {
  it('are none in the recipe’s room', () => {
    expect(scene().things()).toEqual([])
  })

  it('dry the air, with what it wins and the face coats it must not harm', () => {
    expect(scene({ airAt: () => DAMP, trees: [{ need: 8 }, { coat: 1, airTempAtDipC: 20 }] }).things()).toMatchObject([
      {
        title: 'Dry the air to 50 % RH until Wed 07:00',
        text: expect.stringMatching(/^With a dehumidifier, not with heat\. \d+ h.* come back\. Not under 45 %: T-2 is a face coat\.$/),
      },
      { title: 'Hold the room within 2.5 K of 20.0 °C', text: 'Wax moves under a wet face coat and lifts it: T-2.' },
    ])
  })

  it('read what nobody has read, before all else', () => {
    expect(scene({ silentHours: 4, kind: 'wall hygrometer' }).things()).toEqual([
      { title: 'Read the Shell room logger', text: 'No reading since 12:00: T-1 is unknown until one comes.' },
    ])
  })

  it('cool a room that is too hot for the wax, and propose no dryer there', () => {
    const titles = scene({ airAt: () => ({ airTempC: 27, relHumidityPct: 80 }), trees: [{ need: 8 }] })
      .things()
      .map((thing) => thing.title)
    expect(titles).toEqual(['Cool the room under 26.0 °C'])
  })

  it('raise the humidity where a wet face coat chills', () => {
    const [first] = scene({ airAt: () => ({ airTempC: 23, relHumidityPct: 36 }), trees: [{ coat: 1, airTempAtDipC: 23 }] }).things()
    expect(first).toMatchObject({ title: 'Raise the humidity to 45 % RH' })
    expect(first!.text).toContain('chills the wax of T-1')
    expect(scene({ airAt: () => ({ airTempC: 23, relHumidityPct: 36 }), trees: [{ coat: 3 }] }).things()).toEqual([])
  })

  it('leave the fans on where that wins half an hour or more', () => {
    const fanRack = buildPlaceFacts('Rack', {
      airSpeedFansOnMps: 1.5,
      airSpeedFansOffMps: 0.1,
      fanHours: [1, 2, 3, 4, 5].map((weekday) => ({ weekday, onMinute: 420, offMinute: 1080 })),
    })
    const { things, context, effects, tonight } = scene({ places: [fanRack], trees: [{ need: 8 }] })
    const fansOn = fansLeftOn(
      context,
      fanRack,
      effects.map((effect) => effect.tree),
      tonight,
    )!
    expect(things([{ fansOn, gainMs: 3 * HOUR }])).toEqual([
      { title: 'Leave the fans on at Rack until Wed 07:00', text: '1.5 m/s instead of 0.1 m/s: 3 h come back.' },
    ])
    expect(things([{ fansOn, gainMs: 20 * MINUTE }])).toEqual([])
  })

  it('are three at the most', () => {
    const given: Scene = { airAt: () => DAMP, trees: [{ coat: 1, airTempAtDipC: 20 }, { need: 8 }] }
    const { rooms, effects, tonight, coats } = scene(given)
    const many: QueueRoom[] = [
      rooms[0]!,
      { ...rooms[0]!, sensorId: 2, isStale: true },
      { ...rooms[0]!, sensorId: 3, airTempC: 27 },
      { ...rooms[0]!, sensorId: 4, airTempC: 28 },
    ]
    const things = thingsToDo({
      rooms: many,
      effects,
      dryer: null,
      fans: [],
      sensorOf: () => 1,
      coatsOf: () => coats,
      placeFactorOf: () => 1,
      tonight,
      now: NOW,
      timeZone: TIME_ZONE,
      tempUnit: 'degF',
      pressurePa: 101_325,
    })
    expect(things).toHaveLength(3)
    expect(plain(things[0]!.title)).toBe('Cool the room under 78.8 °F')
  })
})

describe('a mild humidity for a face coat', () => {
  it('rises with the temperature and is never under 45 %', () => {
    expect(mildHumidityPct(20, 1, 101_325)).toBe(45)
    expect(mildHumidityPct(26, 1, 101_325)).toBe(50)
    expect(mildHumidityPct(32, 1, 101_325)).toBeGreaterThan(50)
  })

  it.each([1, 1.157, 1.5, 2])('keeps room times place factor within 1.4 at a place factor of %s', (placeFactor) => {
    const pct = mildHumidityPct(23, placeFactor, 101_325)!
    const speedAt = (relHumidityPct: number) => placeFactor * roomFactor({ airTempC: 23, relHumidityPct }, 101_325)
    expect(speedAt(pct)).toBeLessThanOrEqual(1.4)
    // No damper than it has to be.
    expect(pct === 45 || speedAt(pct - 5) > 1.4).toBe(true)
  })

  it('is that of the windiest near-wax tree of the room', () => {
    const dry: Air = { airTempC: 23, relHumidityPct: 36 }
    const places = [buildPlaceFacts('Rack'), buildPlaceFacts('Fan rack', { airSpeedFansOnMps: 2.5, airSpeedFansOffMps: 2.5 })]
    const [calm, windy] = [
      { coat: 1, airTempAtDipC: 23 },
      { coat: 2, airTempAtDipC: 23, placeId: 'Fan rack' },
    ]
    const title = (trees: TreeSpec[]) => scene({ airAt: () => dry, places, trees }).things()[0]!.title
    expect(title([calm])).toBe('Raise the humidity to 45 % RH')
    expect(title([calm, windy])).toBe('Raise the humidity to 55 % RH')
  })
})

describe('a rough duration', () => {
  it('is to five minutes', () => {
    expect(plain(roughDuration(14 * HOUR + 18 * MINUTE))).toBe('14 h 20 min')
    expect(plain(roughDuration(-32 * MINUTE))).toBe('30 min')
  })
})
