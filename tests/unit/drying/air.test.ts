import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { clampRelHumidityPct, dewPointC, stationPressurePa, vaporPressureDeficitPa, wetBulbC } from '@/lib/drying/air'
import { placeFactor } from '@/lib/drying/place-factor'
import { roomFactor, wetBulbDepressionK } from '@/lib/drying/room-factor'
import type { Air } from '@/lib/drying/types'
import { SEA_LEVEL_PA } from './build-readings'

/** Lets a value past the compiler that a file, a form or a sensor could bring. */
// oxlint-disable-next-line typescript/no-unsafe-type-assertion -- the guards are there for what the types cannot stop
const asNumber = (value: unknown) => value as number

const air = (airTempC: unknown, relHumidityPct: unknown): Air => ({
  airTempC: asNumber(airTempC),
  relHumidityPct: asNumber(relHumidityPct),
})

describe('what is not air', () => {
  it.each([
    { name: 'a missing temperature, which would count as 0 degC', value: air(null, 50) },
    { name: 'a temperature of text', value: air('20', 50) },
    { name: 'a temperature that is not a number', value: air(Number.NaN, 50) },
    { name: 'an infinite temperature', value: air(Infinity, 50) },
    { name: 'a temperature in degF', value: air(68, 50) },
    { name: 'a missing humidity', value: air(20, undefined) },
    { name: 'a negative humidity', value: air(20, -1) },
    { name: 'a humidity above 105 %', value: air(20, 105.1) },
  ])('is refused: $name', ({ value }) => {
    for (const work of [
      () => wetBulbC(value, SEA_LEVEL_PA),
      () => dewPointC(value),
      () => vaporPressureDeficitPa(value),
      () => roomFactor(value, SEA_LEVEL_PA),
    ]) {
      expect(work).toThrow(RangeError)
    }
    expect(() => wetBulbC(value, SEA_LEVEL_PA)).toThrow(/must be a number from/)
  })

  it.each([101.325, 29.92, Number.NaN, null, '101325'])('is refused: a pressure of %s', (pressure) => {
    expect(() => wetBulbC(air(20, 50), asNumber(pressure))).toThrow(/Station pressure in Pa must be a number from 50000 to 110000/)
    expect(() => placeFactor(1, asNumber(pressure))).toThrow(RangeError)
  })

  it.each([-431, 5001, Number.NaN, null])('is refused: an altitude of %s', (altitude) => {
    expect(() => stationPressurePa(asNumber(altitude))).toThrow(RangeError)
  })

  it.each([-0.1, 21, Number.NaN, null])('is refused: an air speed of %s', (speed) => {
    expect(() => placeFactor(asNumber(speed), SEA_LEVEL_PA)).toThrow(RangeError)
  })
})

describe('humidity at its ends', () => {
  it('is brought into 0.5 to 100 %', () => {
    expect([0, 0.4, 0.5, 50, 100, 100.3, 105].map(clampRelHumidityPct)).toEqual([0.5, 0.5, 0.5, 50, 100, 100, 100])
  })

  it('gives a dew point for a sensor that reads 0 %', () => {
    expect(dewPointC(air(20, 0))).toBe(dewPointC(air(20, 0.5)))
  })

  it.each([100, 100.3, 105])('dries nothing at %d %%', (relHumidityPct) => {
    expect(wetBulbC(air(20, relHumidityPct), SEA_LEVEL_PA)).toBe(20)
    expect(roomFactor(air(20, relHumidityPct), SEA_LEVEL_PA)).toBe(0)
    expect(vaporPressureDeficitPa(air(20, relHumidityPct))).toBe(0)
  })
})

describe('speed of drying', () => {
  const temps = fc.double({ min: 10, max: 34, noNaN: true })
  const humidities = fc.double({ min: 16, max: 99, noNaN: true })
  const altitudes = fc.double({ min: 0, max: 2500, noNaN: true })

  it('is 1 in the reference room, within the 1e-3 of psychrolib', () => {
    expect(Math.abs(roomFactor(air(21, 50), SEA_LEVEL_PA) * placeFactor(1, SEA_LEVEL_PA) - 1)).toBeLessThan(1e-3)
  })

  it('falls as the room gets damper', () => {
    fc.assert(
      fc.property(temps, humidities, altitudes, (temp, humidity, altitude) => {
        const pressurePa = stationPressurePa(altitude)
        expect(roomFactor(air(temp, humidity + 1), pressurePa)).toBeLessThan(roomFactor(air(temp, humidity), pressurePa))
      }),
    )
  })

  it('rises as the room gets warmer at the same relative humidity', () => {
    fc.assert(
      fc.property(temps, fc.double({ min: 16, max: 95, noNaN: true }), (temp, humidity) => {
        expect(roomFactor(air(temp + 1, humidity), SEA_LEVEL_PA)).toBeGreaterThan(roomFactor(air(temp, humidity), SEA_LEVEL_PA))
      }),
    )
  })

  it('is never negative, and no wet coat is warmer than its room', () => {
    fc.assert(
      fc.property(fc.double({ min: -10, max: 60, noNaN: true }), fc.double({ min: 0, max: 105, noNaN: true }), (temp, humidity) => {
        expect(roomFactor(air(temp, humidity), SEA_LEVEL_PA)).toBeGreaterThanOrEqual(0)
        expect(wetBulbDepressionK(air(temp, humidity), SEA_LEVEL_PA)).toBeGreaterThanOrEqual(0)
      }),
    )
  })

  it('rises with the air speed above 0.1 m/s and is the same below', () => {
    fc.assert(
      fc.property(fc.double({ min: 0.1, max: 19, noNaN: true }), altitudes, (speed, altitude) => {
        const pressurePa = stationPressurePa(altitude)
        expect(placeFactor(speed + 0.01, pressurePa)).toBeGreaterThan(placeFactor(speed, pressurePa))
        expect(placeFactor(speed / 200, pressurePa)).toBe(placeFactor(0.1, pressurePa))
      }),
    )
  })

  it('has a room factor that rises and a place factor that falls with the altitude, their product within 1 %', () => {
    fc.assert(
      fc.property(fc.double({ min: 0, max: 2400, noNaN: true }), (altitude) => {
        const [low, high] = [stationPressurePa(altitude), stationPressurePa(altitude + 100)]
        expect(roomFactor(air(21, 50), high)).toBeGreaterThan(roomFactor(air(21, 50), low))
        expect(placeFactor(1, high)).toBeLessThan(placeFactor(1, low))
        expect(Math.abs(roomFactor(air(21, 50), high) * placeFactor(1, high) - 1)).toBeLessThan(0.01)
      }),
    )
  })
})
