import { describe, expect, it } from 'vitest'
import { estimate } from '@/lib/drying/estimate'
import { estimateInput } from '@/lib/drying/estimate-contract'
import { PLACE_FACTORS, ROOM_FACTORS } from '@/tests/factories/drying-tables'
import { DOSE_TOLERANCE, MOISTURE_TOLERANCE, TIME_TOLERANCE_H, WORKED_DAYS, workedBody, WORKED_START } from '@/tests/factories/worked-days'
import { estimateOf } from '@/tests/unit/drying/build-estimate'
import { hour } from '@/tests/unit/drying/build-readings'

const relativeError = (actual: number, expected: number) => Math.abs(actual / expected - 1)
const hoursAfterStart = (at: number | null) => (at === null ? NaN : (at - WORKED_START) / 3_600_000)

// Constructed cases, recomputed independently: see worked-days.
describe.each(WORKED_DAYS)('the estimate of $name', (day) => {
  const answer = estimate(estimateInput.parse(workedBody(day)))

  it.each(
    day.doses.flatMap(({ hours, likely, low, high, moistureRatio }, index) => {
      const figures = { 'likely dose': likely, 'low dose': low, 'high dose': high, 'water left': moistureRatio }
      return Object.entries(figures).flatMap(([figure, expected]) => (expected === undefined ? [] : [{ hours, index, figure, expected }]))
    }),
  )('has at $hours h $expected as its $figure', ({ index, figure, expected }) => {
    const { dose, moistureRatio } = answer.points[index]!
    const found = { 'likely dose': dose.likely, 'low dose': dose.low, 'high dose': dose.high }[figure]
    const isOff =
      found === undefined
        ? Math.abs(moistureRatio.likely - expected) >= MOISTURE_TOLERANCE
        : relativeError(found, expected) >= DOSE_TOLERANCE
    expect(isOff, `${found ?? moistureRatio.likely}`).toBe(false)
  })

  it.each(Object.entries(day.dry))('is dry, %s, at %d h', (which, expected) => {
    const { earliestAt, likelyAt, safeAt } = answer.dry
    const found = hoursAfterStart({ earliest: earliestAt, likely: likelyAt, safe: safeAt }[which] ?? null)
    expect(Math.abs(found - expected)).toBeLessThan(TIME_TOLERANCE_H)
  })
})

// Our own model, its numbers recomputed with psychrolib and an independent implementation. Tolerance 3e-4: psychrolib stops
// 0.0005 K short of the wet bulb.
describe('room factor, place factor and speed through the estimate', () => {
  it.each(ROOM_FACTORS)('B is $expected at $airTempC degC, $relHumidityPct %, $altitudeM m', ({ expected, altitudeM, ...constant }) => {
    const [point] = estimateOf({ climate: { constant }, pressurePa: undefined, altitudeM, until: hour(1) }).points
    expect(Math.abs(point!.roomFactor! - expected)).toBeLessThan(3e-4)
    expect(point!.dose.likely).toBeCloseTo(point!.speed!, 9)
  })

  it.each([
    { airTempC: 21, relHumidityPct: 50, expected: 1.0033 },
    { airTempC: 24, relHumidityPct: 30, expected: 1.6167 },
  ])('S is $expected at $airTempC degC, $relHumidityPct % and 1600 m in air of 1.0 m/s', ({ expected, ...constant }) => {
    const [point] = estimateOf({ climate: { constant }, pressurePa: undefined, altitudeM: 1600, until: hour(1) }).points
    expect(Math.abs(point!.speed! - expected)).toBeLessThan(3e-4)
  })

  it.each(PLACE_FACTORS)('phi is $expected at $airSpeedMps m/s and $altitudeM m', ({ expected, ...place }) => {
    const [point] = estimateOf({ pressurePa: undefined, ...place }).points
    expect(Math.abs(point!.placeFactor - expected)).toBeLessThan(6e-5)
  })
})

describe('the air through the estimate', () => {
  // Source: PsychroLib 2.5.0, worked value in the header of GetTDewPointFromRelHum: 21.309 degC. Tolerance 0.002 K.
  it('has the dew point of 25 degC and 80 %', () => {
    const { air } = estimateOf({ climate: { constant: { airTempC: 25, relHumidityPct: 80 } } })
    expect(Math.abs(air!.dewPointC - 21.309)).toBeLessThan(0.002)
  })

  // Source: ASHRAE Handbook - Fundamentals (SI) 2017, ch. 1, table 3, as in PsychroLib's own tests: 3169.7 Pa at 25 degC. Tolerance 0.03 %.
  it('has half the saturation pressure of 25 degC as the deficit at 50 %', () => {
    const { air } = estimateOf({ climate: { constant: { airTempC: 25, relHumidityPct: 50 } } })
    expect(relativeError(air!.vaporPressureDeficitPa, 3169.7 / 2)).toBeLessThan(3e-4)
  })

  // Source: ASHRAE Handbook - Fundamentals (SI) 2017, ch. 1, table 1, as in PsychroLib's own tests: 89875 Pa at 1000 m.
  it('has the same dose at an altitude as at its standard pressure', () => {
    const point = (where: object) => estimateOf({ pressurePa: undefined, ...where, until: hour(2) }).points[0]!.dose.likely
    expect(relativeError(point({ altitudeM: 1000 }), point({ pressurePa: 89_875 }))).toBeLessThan(1e-4)
  })
})
