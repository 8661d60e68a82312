import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { DEFAULT_FLAG_LIMITS } from '@/lib/drying/flags'
import { wetBulbDepressionK } from '@/lib/drying/room-factor'
import { betterPlace, dryerFor, dryingTrees, fansLeftOn, nightHours, tonightOf, treeEffects } from '@/lib/room/tonight'
import { buildContext, buildDerived, buildPlaceFacts, buildRoom, HOUR, MINUTE, NOW, RECIPE_AIR, TIME_ZONE, type Air } from './build-room'

const BAND = { lowRhPct: 45, highRhPct: 58 }
const DAMP: Air = { airTempC: 20, relHumidityPct: 75 }
/** Damp from 18:00 to 07:00 by UTC, the recipe's room by day. */
const dampNight = (at: number): Air => {
  const hour = new Date(at).getUTCHours()
  return hour >= 18 || hour < 7 ? DAMP : RECIPE_AIR
}

describe('the time that is weighed', () => {
  it('runs to the next opening, and is tonight', () => {
    expect(tonightOf(buildContext(), true)).toEqual({ from: NOW, to: Date.parse('2026-10-14T06:00:00Z'), name: 'Tonight' })
  })

  it('is the rest of the night after midnight', () => {
    const now = Date.parse('2026-10-14T01:00:00Z')
    expect(tonightOf(buildContext({ now, climates: [] }), true)).toMatchObject({ to: Date.parse('2026-10-14T06:00:00Z'), name: 'Tonight' })
  })

  it('names the day over a weekend, across the end of summer time', () => {
    const now = Date.parse('2026-10-23T15:00:00Z')
    // Monday 26 October 07:00 is winter time.
    expect(tonightOf(buildContext({ now, climates: [] }), true)).toMatchObject({
      to: Date.parse('2026-10-26T07:00:00Z'),
      name: 'Until Mon 07:00',
    })
  })

  it('is a day where the foundry keeps no hours', () => {
    expect(tonightOf(buildContext({ calendar: { hours: [], closures: [] }, climates: [] }), false)).toMatchObject({
      to: NOW + 24 * HOUR,
      name: 'The next 24 h',
    })
  })
})

describe('trees that are drying', () => {
  it('are those whose coat is not dry yet, held and unknown ones among them', () => {
    const context = buildContext({
      climates: [buildRoom(() => RECIPE_AIR), buildRoom(() => RECIPE_AIR, { sensorId: 2, silentHours: 5 })],
      places: [buildPlaceFacts('Rack'), buildPlaceFacts('Loft', { sensorId: 2 })],
    })
    const hold = { id: 'h', reason: 'Crack at the cup.', by: 'Ines', at: NOW }
    const trees = [
      buildDerived(context, { tag: 'T-1' }),
      buildDerived(context, { tag: 'T-2', hoursAgo: 30 }),
      buildDerived(context, { tag: 'T-3', hold }),
      buildDerived(context, { tag: 'T-4', hold, hoursAgo: 30 }),
      buildDerived(context, { tag: 'T-5', placeId: 'Loft' }),
      buildDerived(context, { tag: 'T-6', coat: 5, hoursAgo: 2 }),
      buildDerived(context, { tag: 'T-7', coat: 5, hoursAgo: 40 }),
    ]
    expect(dryingTrees(trees).map((tree) => tree.facts.tag)).toEqual(['T-1', 'T-3', 'T-5', 'T-6'])
  })
})

const effectOf = (airAt: (at: number) => Air, spec: Parameters<typeof buildDerived>[1] = {}, withDryer = false) => {
  const climate = buildRoom(airAt)
  const context = buildContext({ climates: [climate] })
  const trees = dryingTrees([buildDerived(context, spec)])
  const tonight = tonightOf(context, true)
  return treeEffects(trees, context, tonight, withDryer ? dryerFor(context, climate, trees, tonight, BAND) : null)[0]!
}

describe('hours lost and won', () => {
  it('are none in the recipe’s room', () => {
    expect(Math.abs(effectOf(() => RECIPE_AIR).lostMs!)).toBeLessThan(MINUTE)
  })

  it('are how much later the coat is likely dry than in the recipe’s room', () => {
    // Need 8, an hour in: seven reference hours to go. Three of them by 18:00 UTC in the recipe's room, then damp at 0.545.
    const { lostMs } = effectOf(dampNight, { need: 8 })
    const speed = buildRoom(() => DAMP).newest!.roomFactor
    expect(lostMs! / HOUR).toBeCloseTo(4 / speed - 4, 1)
  })

  it('count as won where the air is faster', () => {
    expect(effectOf(() => ({ airTempC: 23, relHumidityPct: 40 }), { need: 8 }).lostMs!).toBeLessThan(-HOUR)
  })

  it('say nothing of a tree whose air nobody reads', () => {
    const context = buildContext({ climates: [buildRoom(() => DAMP, { silentHours: 5 })] })
    const trees = dryingTrees([buildDerived(context)])
    expect(treeEffects(trees, context, tonightOf(context, true), null)).toMatchObject([
      { lostMs: null, wonBackMs: null, asItStands: { likelyAt: null, safeAt: null } },
    ])
  })

  it('put the tree that loses most first', () => {
    const context = buildContext({ climates: [buildRoom(dampNight)] })
    const trees = dryingTrees([buildDerived(context, { tag: 'T-1', need: 3.2 }), buildDerived(context, { tag: 'T-2', need: 9 })])
    expect(treeEffects(trees, context, tonightOf(context, true), null).map((effect) => effect.tree.facts.tag)).toEqual(['T-2', 'T-1'])
  })
})

describe('the dryer', () => {
  it('brings the air to the middle of the band and wins part of what is lost back', () => {
    const { lostMs, wonBackMs, withDryer, asItStands } = effectOf(dampNight, { need: 8 }, true)
    expect(wonBackMs!).toBeGreaterThan(2 * HOUR)
    expect(wonBackMs!).toBeLessThanOrEqual(lostMs! + 5 * MINUTE)
    expect(withDryer!.likelyAt!).toBe(asItStands.likelyAt! - wonBackMs!)
  })

  const dryer = (airAt: (at: number) => Air, spec: Parameters<typeof buildDerived>[1] = {}, band = BAND, speed = 1) => {
    const climate = buildRoom(airAt)
    const context = buildContext({
      climates: [climate],
      places: [buildPlaceFacts('Rack', { airSpeedFansOnMps: speed, airSpeedFansOffMps: speed })],
    })
    return dryerFor(context, climate, dryingTrees([buildDerived(context, spec)]), tonightOf(context, true), band)
  }

  it('is not proposed where the air is dry enough', () => {
    expect(dryer(() => RECIPE_AIR)?.targetPct).toBeUndefined()
  })

  it('never goes under 45 %', () => {
    expect(dryer(() => DAMP, {}, { lowRhPct: 30, highRhPct: 40 })?.targetPct).toBe(45)
  })

  it('is milder where a face coat would dry too fast', () => {
    const warm: Air = { airTempC: 25.5, relHumidityPct: 75 }
    expect(dryer(() => warm, { coat: 3, airTempAtDipC: 25.5 })?.targetPct).toBe(50)
    expect(dryer(() => warm, { coat: 1, airTempAtDipC: 25.5 }, { lowRhPct: 40, highRhPct: 55 }, 1.5)?.targetPct).toBe(50)
    expect(dryer(() => warm, { coat: 3, airTempAtDipC: 25.5 }, { lowRhPct: 40, highRhPct: 55 }, 1.5)?.targetPct).toBe(50)
    expect(dryer(() => warm, { coat: 1, airTempAtDipC: 25.5 }, BAND, 2)?.targetPct).toBe(55)
  })

  it('is not proposed in a room too hot for the wax, which it would heat on', () => {
    expect(dryer(() => ({ airTempC: 26.5, relHumidityPct: 75 }))?.targetPct).toBeUndefined()
  })

  it('is not proposed in a room more than 3 K above coat 1, which it would heat on', () => {
    const warm: Air = { airTempC: 24.5, relHumidityPct: 75 }
    expect(dryer(() => warm, { airTempAtDipC: 21 })?.targetPct).toBeUndefined()
    expect(dryer(() => warm, { airTempAtDipC: 22 })?.targetPct).toBe(50)
  })

  it('keeps every limit, whatever the air and the coat', () => {
    const air = fc.record({
      airTempC: fc.double({ min: 14, max: 28, noNaN: true }),
      relHumidityPct: fc.double({ min: 40, max: 95, noNaN: true }),
    })
    fc.assert(
      fc.property(air, fc.constantFrom(1, 2, 3, 5), fc.constantFrom(0.1, 0.5, 1, 1.5, 2.5), (room, coat, speed) => {
        const found = dryer(() => room, { coat, airTempAtDipC: room.airTempC }, BAND, speed)
        if (found === null) return
        expect(found.targetPct).toBeGreaterThanOrEqual(45)
        expect(room.airTempC).toBeLessThanOrEqual(DEFAULT_FLAG_LIMITS.heatC)
        const gapK = wetBulbDepressionK({ airTempC: room.airTempC, relHumidityPct: found.targetPct }, 101_325)
        expect(gapK).toBeLessThanOrEqual(coat <= 2 ? DEFAULT_FLAG_LIMITS.chillWarnK : DEFAULT_FLAG_LIMITS.laterCoatChillK)
      }),
      { numRuns: 25 },
    )
  })
})

const NIGHT_OFF = [1, 2, 3, 4, 5].map((weekday) => ({ weekday, onMinute: 420, offMinute: 1080 }))

describe('fans left on', () => {
  const fanRack = buildPlaceFacts('Rack', { airSpeedFansOnMps: 1.5, airSpeedFansOffMps: 0.1, fanHours: NIGHT_OFF })
  const left = (place: typeof fanRack, spec: Parameters<typeof buildDerived>[1] = {}, air = RECIPE_AIR) => {
    const context = buildContext({ climates: [buildRoom(() => air)], places: [place] })
    const trees = dryingTrees([buildDerived(context, spec)])
    const tonight = tonightOf(context, true)
    const fans = fansLeftOn(context, place, trees, tonight)
    return { fans, name: fans?.place.name ?? null, context, tonight }
  }

  it('hold their speed until the opening and follow the timetable again', () => {
    const { fans, tonight } = left(fanRack)
    const spans = fans!.context.placeSpans.get('Rack')!
    for (const [index, span] of spans.entries()) expect(span.from).toBe(spans[index - 1]?.to ?? span.from)
    const during = spans.filter((span) => span.to > tonight.from && span.from < tonight.to)
    expect(during).toHaveLength(1)
    expect(during[0]!.placeFactor).toBeCloseTo(1.1573, 4)
    expect(spans.find((span) => span.from >= tonight.to)!.placeFactor).toBeGreaterThan(1)
  })

  it('are not proposed where there are none to switch', () => {
    expect(left(buildPlaceFacts('Rack')).name).toBeNull()
  })

  it('are not proposed where a face coat would dry too fast', () => {
    const dry: Air = { airTempC: 23, relHumidityPct: 43 }
    expect(left(fanRack, { coat: 1, airTempAtDipC: 23 }, dry).name).toBeNull()
    expect(left(fanRack, { coat: 3 }, dry).name).toBe('Rack')
  })
})

describe('a better place', () => {
  const calm = buildPlaceFacts('Rack', { airSpeedFansOnMps: 0.1, airSpeedFansOffMps: 0.1 })
  const windy = buildPlaceFacts('Fan rack', { airSpeedFansOnMps: 1.5, airSpeedFansOffMps: 1.5 })
  const loft = buildPlaceFacts('Loft', { sensorId: 2, airSpeedFansOnMps: 1.5, airSpeedFansOffMps: 1.5 })
  const better = (
    places: (typeof calm)[],
    spec: Parameters<typeof buildDerived>[1] = {},
    loftAir: Air | ((at: number) => Air) = RECIPE_AIR,
    silentHours = 0,
  ) => {
    const loftAirAt = typeof loftAir === 'function' ? loftAir : () => loftAir
    const climates = [buildRoom(() => RECIPE_AIR), buildRoom(loftAirAt, { sensorId: 2, silentHours })]
    const context = buildContext({ climates, places })
    const [tree] = dryingTrees([buildDerived(context, spec)])
    const move = betterPlace(tree!, context, places, tonightOf(context, true))
    return { name: move?.place.name ?? null, likelyAt: move?.call.likelyAt ?? null }
  }

  it('is the one with the most drying, with the times it would give', () => {
    const move = better([calm, windy], { need: 8 })
    expect(move.name).toBe('Fan rack')
    expect((move.likelyAt! - NOW) / HOUR).toBeCloseTo((8 - 0.521 * (59 / 60)) / 1.157, 1)
  })

  it('is none where the tree hangs well already', () => {
    expect(better([buildPlaceFacts('Rack'), buildPlaceFacts('Other')]).name).toBeNull()
  })

  it('is not one whose air nobody reads', () => {
    expect(better([calm, loft], {}, RECIPE_AIR, 3).name).toBeNull()
    expect(better([calm, loft]).name).toBe('Loft')
  })

  it('is not one where a face coat would chill, swing, or dry too fast', () => {
    const hot: Air = { airTempC: 24, relHumidityPct: 50 }
    expect(better([calm, loft], { coat: 1 }, hot).name).toBeNull()
    expect(better([calm, loft], { coat: 3 }, hot).name).toBe('Loft')
    expect(better([calm, loft], { coat: 1 }, { airTempC: 22, relHumidityPct: 42 }).name).toBeNull()
  })

  it('is not one that will swing in the night, though it holds now', () => {
    const coldNight = (at: number): Air => ({ airTempC: dampNight(at) === DAMP ? 18 : 21, relHumidityPct: 50 })
    expect(better([calm, loft], { coat: 2 }, coldNight).name).toBeNull()
    expect(better([calm, loft], { coat: 3 }, coldNight).name).toBe('Loft')
    expect(better([calm, loft], { coat: 2 }).name).toBe('Loft')
  })

  it('is none for a coat close to the wax whose air at the dip is not known', () => {
    expect(better([calm, loft], { coat: 2, airTempAtDipC: null }).name).toBeNull()
    expect(better([calm, loft], { coat: 3, airTempAtDipC: null }).name).toBe('Loft')
  })

  it('is not one too hot for the wax, or more than 3 K above coat 1', () => {
    expect(better([calm, loft], { coat: 3 }, { airTempC: 27, relHumidityPct: 40 }).name).toBeNull()
    const warm: Air = { airTempC: 24.5, relHumidityPct: 50 }
    expect(better([calm, loft], { coat: 3, airTempAtDipC: 21 }, warm).name).toBeNull()
    expect(better([calm, loft], { coat: 3, airTempAtDipC: 22 }, warm).name).toBe('Loft')
  })
})

describe('the hours of the night', () => {
  it('have the forecast of temperature, humidity and speed', () => {
    const climate = buildRoom(dampNight)
    const hours = nightHours(climate, tonightOf(buildContext({ climates: [climate] }), true), TIME_ZONE)
    expect(hours).toHaveLength(15)
    expect(hours[0]).toMatchObject({ from: NOW, airTempC: 21, relHumidityPct: 50 })
    expect(hours.at(-1)).toMatchObject({ airTempC: 20, relHumidityPct: 75 })
  })
})
