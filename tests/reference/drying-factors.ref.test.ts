import { describe, expect, it } from 'vitest'
import { stationPressurePa } from '@/lib/drying/air'
import { moistureRatio, pageK } from '@/lib/drying/moisture'
import { needBand, sigma } from '@/lib/drying/need'
import { placeFactor } from '@/lib/drying/place-factor'
import { heatOfEvaporationKjKg, roomFactor, wetBulbDepressionK } from '@/lib/drying/room-factor'
import { PLACE_FACTORS, ROOM_FACTORS } from '@/tests/factories/drying-tables'

const SEA_LEVEL_PA = 101_325

// Source of the whole file unless said otherwise: our own model, its numbers recomputed with psychrolib and an independent
// implementation. Tolerances: 3e-4 on room factors (psychrolib stops 0.0005 K short of the wet bulb), half the last digit elsewhere.
describe('roomFactor', () => {
  it.each(ROOM_FACTORS)(
    'is $expected at $airTempC degC, $relHumidityPct %, $altitudeM m',
    ({ airTempC, relHumidityPct, altitudeM, expected }) => {
      const factor = roomFactor({ airTempC, relHumidityPct }, stationPressurePa(altitudeM))
      expect(Math.abs(factor - expected)).toBeLessThan(3e-4)
    },
  )
})

describe('placeFactor', () => {
  it.each(PLACE_FACTORS)('is $expected at $airSpeedMps m/s and $altitudeM m', ({ airSpeedMps, altitudeM, expected }) => {
    expect(Math.abs(placeFactor(airSpeedMps, stationPressurePa(altitudeM)) - expected)).toBeLessThan(6e-5)
  })
})

describe('speed in air of 1 m/s, room factor x place factor', () => {
  it.each([
    { airTempC: 21, relHumidityPct: 50, altitudeM: 0, expected: 1 },
    { airTempC: 21, relHumidityPct: 50, altitudeM: 500, expected: 1.0016 },
    { airTempC: 21, relHumidityPct: 50, altitudeM: 1000, expected: 1.0027 },
    { airTempC: 21, relHumidityPct: 50, altitudeM: 1600, expected: 1.0033 },
    { airTempC: 21, relHumidityPct: 50, altitudeM: 2500, expected: 1.0029 },
    { airTempC: 24, relHumidityPct: 30, altitudeM: 1600, expected: 1.6167 },
  ])('is $expected at $airTempC degC, $relHumidityPct %, $altitudeM m', ({ airTempC, relHumidityPct, altitudeM, expected }) => {
    const pressurePa = stationPressurePa(altitudeM)
    const speed = roomFactor({ airTempC, relHumidityPct }, pressurePa) * placeFactor(1, pressurePa)
    expect(Math.abs(speed - expected)).toBeLessThan(3e-4)
  })

  // Anchor: Dooley and Everden, INCAST Nov 2020, room of a companion trial at 20.7 degC, 45 %, 0.6 m/s; little strength after 4 h.
  it('makes 3.7 reference hours of the four hours of the intercoat trial', () => {
    const speed = roomFactor({ airTempC: 20.7, relHumidityPct: 45 }, SEA_LEVEL_PA) * placeFactor(0.6, SEA_LEVEL_PA)
    expect(Math.abs(speed - 0.9293)).toBeLessThan(3e-4)
  })
})

// Tolerance 0.006 K: two printed decimals and 0.0005 K of psychrolib.
describe('wetBulbDepressionK, the chill of the wax', () => {
  it.each([
    { airTempC: 21, relHumidityPct: 50, expectedK: 6.4 },
    { airTempC: 21, relHumidityPct: 45, expectedK: 7.12 },
    { airTempC: 21, relHumidityPct: 40, expectedK: 7.87 },
    { airTempC: 24, relHumidityPct: 45, expectedK: 7.73 },
    { airTempC: 24, relHumidityPct: 35, expectedK: 9.41 },
    { airTempC: 20, relHumidityPct: 55, expectedK: 5.53 },
    { airTempC: 18, relHumidityPct: 60, expectedK: 4.59 },
  ])('is $expectedK K at $airTempC degC and $relHumidityPct %', ({ airTempC, relHumidityPct, expectedK }) => {
    expect(Math.abs(wetBulbDepressionK({ airTempC, relHumidityPct }, SEA_LEVEL_PA) - expectedK)).toBeLessThan(0.006)
  })
})

// Source: IAPWS steam tables, from memory. Tolerance 0.6 kJ/kg: the straight line's own error from 0 to 40 degC.
describe('heatOfEvaporationKjKg', () => {
  it.each([
    { tempC: 0, expected: 2500.9 },
    { tempC: 20, expected: 2453.5 },
    { tempC: 25, expected: 2441.7 },
    { tempC: 30, expected: 2429.8 },
    { tempC: 40, expected: 2406 },
  ])('is $expected kJ/kg at $tempC degC', ({ tempC, expected }) => {
    expect(Math.abs(heatOfEvaporationKjKg(tempC) - expected)).toBeLessThan(0.61)
  })
})

describe('spread of the need', () => {
  it('is 0.25, and 0.7259 and 1.3777 times the need at P10 and P90', () => {
    const spread = sigma({ recessClass: 'none', hasTyped: false })
    expect(spread).toBe(0.25)
    expect(needBand(1, spread).low).toBeCloseTo(0.7259, 4)
    expect(needBand(1, spread).high).toBeCloseTo(1.3777, 4)
  })

  it('is 0.269 with a recess and 0.35 when typed', () => {
    expect(sigma({ recessClass: 'deep recess', hasTyped: false })).toBeCloseTo(0.269, 3)
    expect(sigma({ recessClass: 'none', hasTyped: true })).toBeCloseTo(0.35, 12)
  })

  // A weighing leaves a spread of 0.0726 about a need of 5.120: P10 4.665, P90 5.619.
  it('narrows with evidence', () => {
    const spread = sigma({ recessClass: 'none', hasTyped: false, baseSigma: 0.0726 })
    expect(needBand(5.12, spread).low).toBeCloseTo(4.665, 3)
    expect(needBand(5.12, spread).high).toBeCloseTo(5.619, 3)
  })
})

// Source: closed forms of Page 1949, MR = exp(-k t^n). Tolerance 1e-9 on the ratio.
describe('Page', () => {
  it.each([
    { k: 0.6, n: 1.1 },
    { k: 0.50113, n: 1.1 },
    { k: 1.3, n: 0.8 },
    { k: 0.05, n: 1 },
  ])('has the half time and the 5 % time of k $k and n $n', ({ k, n }) => {
    const need = (Math.log(10) / k) ** (1 / n)
    expect(Math.abs(moistureRatio((Math.LN2 / k) ** (1 / n), need, 0.1, n) - 0.5)).toBeLessThan(1e-9)
    expect(Math.abs(moistureRatio((Math.log(20) / k) ** (1 / n), need, 0.1, n) - 0.05)).toBeLessThan(1e-9)
  })

  it('has k 0.50113 for a need of 4.0 and 0.84039 for 2.5', () => {
    expect(pageK(4, 0.1, 1.1)).toBeCloseTo(0.50113, 5)
    expect(pageK(2.5, 0.1, 1.1)).toBeCloseTo(0.84039, 5)
  })

  // k 0.6, n 1.1: a coat that needs (ln 10 / 0.6)^(1/1.1) to reach 0.1.
  it.each([
    [0.5, 0.7559],
    [1, 0.5488],
    [1.5, 0.3917],
    [2, 0.2763],
    [3, 0.1341],
    [4, 0.0635],
  ])('has dried after %d reference hours to %d', (dose, expected) => {
    const need = (Math.log(10) / 0.6) ** (1 / 1.1)
    expect(Math.abs(moistureRatio(dose, need, 0.1, 1.1) - expected)).toBeLessThan(6e-5)
  })
})
