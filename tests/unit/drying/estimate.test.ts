import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { estimate } from '@/lib/drying/estimate'
import { estimateInput } from '@/lib/drying/estimate-contract'
import { HUMID_NIGHT } from '@/tests/factories/worked-days'
import { estimateBody, estimateOf, rows } from './build-estimate'
import { hour, MINUTE_MS } from './build-readings'

const codes = (overrides: Record<string, unknown>) => estimateOf(overrides).flags.map((flag) => flag.code)
const constant = (airTempC: number, relHumidityPct: number) => ({ climate: { constant: { airTempC, relHumidityPct } } })
const night = { climate: rows(HUMID_NIGHT), airSpeedMps: 0.5 }

describe('the flags of an estimate', () => {
  it('are none in the room of the recipe', () => {
    expect(codes({ coatNumber: 1 })).toEqual([])
  })

  it('say damp where the hour before the call was, by the time it concerns', () => {
    expect(estimateOf(night).flags).toContainEqual({ code: 'damp', at: 'likely', relHumidityPct: 78, limitPct: 75 })
    expect(estimateOf({ ...night, need: { referenceHours: 2 } }).flags.filter((flag) => flag.code === 'damp')).toEqual([])
  })

  it('warn of chill above 8 K and stop above 10 K on the first two coats, and above 12 K on later ones', () => {
    const chill = (coatNumber: number, airTempC: number, relHumidityPct: number) =>
      estimateOf({ ...constant(airTempC, relHumidityPct), coatNumber, airSpeedMps: 0 }).flags.find((flag) => flag.code === 'chill')
    expect(chill(2, 24, 45)).toBeUndefined()
    expect(chill(2, 24, 40)).toMatchObject({ level: 'warn', limitK: 8 })
    expect(chill(2, 24, 30)).toMatchObject({ level: 'stop', limitK: 10 })
    expect(chill(3, 24, 30)).toBeUndefined()
    expect(chill(3, 26, 20)).toMatchObject({ level: 'warn', limitK: 12 })
  })

  it('say too fast beside the chill, not instead of it', () => {
    expect(codes({ ...constant(24, 40), coatNumber: 1, airSpeedMps: 2 })).toEqual(['chill', 'too fast'])
    expect(codes({ ...constant(21, 50), coatNumber: 1, airSpeedMps: 3 })).toEqual(['too fast'])
    expect(codes({ ...constant(21, 50), coatNumber: 3, airSpeedMps: 3 })).toEqual([])
  })

  it('say swing where the room has left its temperature at the dip while a face coat is wet', () => {
    expect(codes({ coatNumber: 1, airTempAtDipC: 18.4 })).toEqual(['swing'])
    expect(codes({ coatNumber: 1, airTempAtDipC: 18.6 })).toEqual([])
    expect(codes({ coatNumber: 3, airTempAtDipC: 18.4 })).toEqual([])
    expect(estimateOf({ ...night, coatNumber: 1 }).flags).toContainEqual(expect.objectContaining({ code: 'swing', limitK: 2.5 }))
  })

  it('say heat above 26 degC or 3 K above coat 1', () => {
    expect(codes(constant(26.1, 60))).toEqual(['heat'])
    expect(estimateOf({ airTempAtCoat1C: 17.9 }).flags).toMatchObject([{ code: 'heat', measure: 'above coat 1', limit: 3 }])
    expect(codes({ airTempAtCoat1C: 18.1 })).toEqual([])
  })

  it('count the minutes of gaps', () => {
    const climate = rows([
      [0, 21, 50],
      [2, 21, 50],
      [2.5, 21, 50],
    ])
    expect(estimateOf({ climate }).flags).toEqual([{ code: 'gap', minutes: 120 }])
  })

  it('say stale, and never dry, where the newest reading is too old', () => {
    const answer = estimateOf({ climate: rows([[0, 21, 50]]), until: hour(6) })
    expect(answer.flags).toMatchObject([{ code: 'stale', minutes: 360, limitMinutes: 30 }])
    expect(answer).toMatchObject({ isUnknown: true, dry: { likelyAt: null, safeAt: null } })
    expect(answer.points[0]).toMatchObject({ roomFactor: null, speed: null })
    expect(answer.points[0]!.dose.likely).toBeCloseTo(0.5, 3)
  })
})

describe('the need of an estimate', () => {
  const likely = (need: object) => estimateOf({ need: { referenceHours: 4, ...need } }).need.likely

  it('takes every factor of the product', () => {
    expect(likely({})).toBe(4)
    expect(likely({ recipeStucco: 'fine', usedStucco: 'coarse' })).toBeCloseTo((4 * 1.15) / 0.9, 12)
    expect(likely({ usedStucco: 'none', recipeStucco: 'coarse' })).toBeCloseTo(4 / 1.15, 12)
    expect(likely({ spacing: 'crowded' })).toBe(5)
    expect(likely({ recessClass: 'closed core' })).toBe(10)
    expect(likely({ moistureRatioBelow: 0.4 })).toBeCloseTo(4.8, 12)
    expect(likely({ theta: 0.2 })).toBeCloseTo(4 * Math.exp(0.2), 12)
  })

  it('starts the clock at the stucco', () => {
    const [first] = estimateOf({ drainSeconds: 90, at: [hour(1)], until: hour(1) }).points
    expect(first!.dose.likely).toBeCloseTo(1 - 90 / 3600, 3)
  })

  it('stops at likely with one typed reading, and widens with it', () => {
    const typed = estimateOf({
      climate: { readings: [{ at: hour(0), airTempC: 21, relHumidityPct: 50, source: 'typed' }] },
      until: hour(8),
    })
    expect(typed).toMatchObject({ needsConfirmation: true, dry: { safeAt: null } })
    expect(typed.dry.likelyAt).not.toBeNull()
    expect(typed.need.sigma).toBeCloseTo(0.35, 12)
  })
})

describe('air speeds in stretches', () => {
  it('split the dose exactly', () => {
    const airSpeeds = [
      { from: hour(-1), airSpeedMps: 1 },
      { from: hour(2), airSpeedMps: 0.1 },
    ]
    const [point] = estimateOf({ airSpeedMps: undefined, airSpeeds, until: hour(5) }).points
    expect(point!.dose.likely).toBeCloseTo(2 * point!.roomFactor! + 3 * 0.52136 * point!.roomFactor!, 4)
    expect(point!.placeFactor).toBeCloseTo(0.52136, 4)
  })
})

describe('a body that the door refuses', () => {
  const reading = { at: hour(0), airTempC: 21, relHumidityPct: 50 }
  it.each([
    ['no air', { climate: {} }, 'climate'],
    ['two airs', { climate: { constant: { airTempC: 21, relHumidityPct: 50 }, readings: [reading] } }, 'climate'],
    ['an air from outside a shell room', { climate: { constant: { airTempC: 80, relHumidityPct: 50 } } }, 'climate.constant.airTempC'],
    ['a bad row', { climate: { readings: [reading, { ...reading, relHumidityPct: 140 }] } }, 'climate.readings.1.relHumidityPct'],
    ['two rows of one time that differ', { climate: { readings: [reading, { ...reading, airTempC: 22 }] } }, 'climate.readings.1.at'],
    ['a time without a zone', { dippedAt: '2026-09-01T18:00:00' }, 'dippedAt'],
    ['no air speed', { airSpeedMps: undefined }, 'airSpeedMps'],
    ['two pressures', { altitudeM: 0 }, 'altitudeM'],
    ['a pressure in hectopascals', { pressurePa: 1013 }, 'pressurePa'],
    ['stretches that begin after the dip', { airSpeedMps: undefined, airSpeeds: [{ from: hour(1), airSpeedMps: 1 }] }, 'airSpeeds.0.from'],
    ['an instant after the end', { until: hour(2), at: [hour(1), hour(3)] }, 'at.1'],
    ['an end before the dip', { until: hour(-1) }, 'until'],
    ['a recess nobody knows', { need: { referenceHours: 4, recessClass: 'slot' } }, 'need.recessClass'],
    ['a field that does not belong', { fanHours: [] }, ''],
  ])('%s', (_what, overrides, path) => {
    const parsed = estimateInput.safeParse(estimateBody(overrides))
    expect(parsed.error?.issues.map((issue) => issue.path.join('.'))).toContain(path)
  })

  it('is not one that names the same reading twice', () => {
    const once = estimateOf({ climate: { readings: [reading] }, until: hour(0.4) })
    const twice = estimateOf({ climate: { readings: [reading, reading] }, until: hour(0.4) })
    expect(twice).toEqual(once)
  })
})

/** Readings of a day at uneven minutes, some with gaps between them. */
const arbitraryClimate = fc
  .array(
    fc.record({
      step: fc.oneof(
        { weight: 5, arbitrary: fc.integer({ min: 1, max: 60 }) },
        { weight: 1, arbitrary: fc.integer({ min: 61, max: 400 }) },
      ),
      airTempC: fc.double({ min: 10, max: 35, noNaN: true }),
      relHumidityPct: fc.double({ min: 20, max: 100, noNaN: true }),
    }),
    { minLength: 2, maxLength: 25 },
  )
  .map((steps) => {
    let at = hour(0)
    return steps.map(({ step, ...air }, index) => {
      at += index === 0 ? 0 : step * MINUTE_MS
      return { at, ...air }
    })
  })
const arbitraryNeed = fc.record({
  referenceHours: fc.double({ min: 0.2, max: 30, noNaN: true }),
  recessClass: fc.constantFrom('none', 'deep recess', 'closed core'),
  theta: fc.double({ min: -1, max: 1, noNaN: true }),
})

describe('any estimate', () => {
  it('does not mind the order of the rows', () => {
    const shuffled = arbitraryClimate.chain((readings) =>
      fc.tuple(fc.constant(readings), fc.shuffledSubarray(readings, { minLength: readings.length })),
    )
    fc.assert(
      fc.property(shuffled, arbitraryNeed, ([inOrder, inAnyOrder], need) => {
        expect(estimateOf({ climate: { readings: inAnyOrder }, need })).toEqual(estimateOf({ climate: { readings: inOrder }, need }))
      }),
      { numRuns: 60 },
    )
  })

  it('adds up: a dose in two parts is the dose in one, and never falls', () => {
    fc.assert(
      fc.property(arbitraryClimate, fc.nat({ max: 1000 }), fc.nat({ max: 1000 }), (readings, one, other) => {
        const end = readings.at(-1)!.at
        const [first = 0, second = 0] = [one, other]
          .toSorted((a, b) => a - b)
          .map((share) => hour(0) + Math.round(((end - hour(0)) * share) / 1000))
        const base = { climate: { readings }, until: end }
        const [toFirst, toSecond] = estimateOf({ ...base, at: [first, second] }).points
        expect(toSecond!.dose.likely).toBeGreaterThanOrEqual(toFirst!.dose.likely - 1e-9)
        // A coat dipped in the middle is credited from its own start only where a reading held then.
        const later = estimateOf({ ...base, dippedAt: first, at: [second] })
        if (later.creditedFrom !== first) return
        expect(toFirst!.dose.likely + later.points[0]!.dose.likely).toBeCloseTo(toSecond!.dose.likely, 9)
      }),
      { numRuns: 120 },
    )
  })

  it('is safe no sooner than likely, and likely no sooner than the earliest', () => {
    fc.assert(
      fc.property(arbitraryClimate, arbitraryNeed, (readings, need) => {
        const { dry, points } = estimateOf({ climate: { readings }, need })
        const never = (at: number | null) => at ?? Infinity
        expect(never(dry.safeAt)).toBeGreaterThanOrEqual(never(dry.likelyAt))
        expect(never(dry.likelyAt)).toBeGreaterThanOrEqual(never(dry.earliestAt))
        for (const { dose, moistureRatio } of points) {
          expect(dose.low).toBeLessThanOrEqual(dose.likely + 1e-9)
          expect(dose.likely).toBeLessThanOrEqual(dose.high + 1e-9)
          expect(moistureRatio.low).toBeLessThanOrEqual(moistureRatio.likely + 1e-12)
          expect(moistureRatio.likely).toBeLessThanOrEqual(moistureRatio.high + 1e-12)
        }
      }),
      { numRuns: 120 },
    )
  })

  it('is at the target at the likely time', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 12, max: 28, noNaN: true }),
        fc.double({ min: 25, max: 85, noNaN: true }),
        (airTempC, relHumidityPct) => {
          const asked = { ...constant(airTempC, relHumidityPct), need: { referenceHours: 3, moistureTarget: 0.07 } }
          const { likelyAt } = estimateOf(asked).dry
          const [point] = estimate(estimateInput.parse(estimateBody({ ...asked, at: [likelyAt] }))).points
          expect(point!.moistureRatio.likely).toBeCloseTo(0.07, 4)
        },
      ),
      { numRuns: 40 },
    )
  })
})
