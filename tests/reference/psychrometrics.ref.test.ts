import psychrolib from 'psychrolib'
import { describe, expect, it } from 'vitest'
import { dewPointC, stationPressurePa, vaporPressureDeficitPa, wetBulbC } from '@/lib/drying/air'

// psychrolib itself is on trial here, beside the guarded functions that the clock calls: against printed tables and against the
// equations of ASHRAE Handbook - Fundamentals (SI) 2017, ch. 1, written out below.

/** Saturation pressure, Pa. ASHRAE 2017 ch. 1, eq. 5 over ice and eq. 6 over water. */
function saturationPa(tempC: number): number {
  const k = tempC + 273.15
  if (tempC < 0.01) {
    const ice = -5.6745359e3 / k + 6.3925247 - 9.677843e-3 * k + 6.2215701e-7 * k ** 2 + 2.0747825e-9 * k ** 3 - 9.484024e-13 * k ** 4
    return Math.exp(ice + 4.1635019 * Math.log(k))
  }
  const water = -5.8002206e3 / k + 1.3914993 - 4.8640239e-2 * k + 4.1764768e-5 * k ** 2 - 1.4452093e-8 * k ** 3
  return Math.exp(water + 6.5459673 * Math.log(k))
}

/** Humidity ratio, kg/kg, from a vapour pressure. ASHRAE 2017 ch. 1, eq. 20. */
const humidityRatio = (vaporPa: number, pressurePa: number) => (0.621945 * vaporPa) / (pressurePa - vaporPa)

/** Value between two bounds at which a rising function is zero. */
function bisect(rising: (value: number) => number, from: number, to: number): number {
  let [low, high] = [from, to]
  for (let step = 0; step < 60; step += 1) {
    const middle = (low + high) / 2
    if (rising(middle) < 0) low = middle
    else high = middle
  }
  return (low + high) / 2
}

/** Wet bulb, degC, from ASHRAE 2017 ch. 1, eq. 33, by bisection between dew point and air temperature. */
function wetBulbByHand(tempC: number, relHumidityPct: number, pressurePa: number): number {
  const ratio = humidityRatio((relHumidityPct / 100) * saturationPa(tempC), pressurePa)
  const ratioAt = (wet: number) =>
    ((2501 - 2.326 * wet) * humidityRatio(saturationPa(wet), pressurePa) - 1.006 * (tempC - wet)) / (2501 + 1.86 * tempC - 4.186 * wet)
  return bisect((wet) => ratioAt(wet) - ratio, dewPointByHand(tempC, relHumidityPct), tempC)
}

/** Dew point, degC: the temperature whose saturation pressure is the vapour pressure. */
function dewPointByHand(tempC: number, relHumidityPct: number): number {
  const vaporPa = (relHumidityPct / 100) * saturationPa(tempC)
  return bisect((dew) => saturationPa(dew) - vaporPa, -60, tempC)
}

/** Wet bulb at sea level, degC. Stull 2011, J. Appl. Meteor. Climatol. 50, 2267-2269. A plausibility check, never the clock. */
function stullWetBulbC(tempC: number, rh: number): number {
  return (
    tempC * Math.atan(0.151977 * Math.sqrt(rh + 8.313659)) +
    Math.atan(tempC + rh) -
    Math.atan(rh - 1.676331) +
    0.00391838 * rh ** 1.5 * Math.atan(0.023101 * rh) -
    4.686035
  )
}

const relativeError = (actual: number, expected: number) => Math.abs(actual / expected - 1)
const absoluteError = (actual: number, expected: number) => Math.abs(actual - expected)

// Source: ASHRAE 2017 ch. 1, Table 3, as quoted in psychrolib's own tests. Tolerance 300 ppm.
describe('saturation pressure against ASHRAE 2017 ch. 1, Table 3', () => {
  it.each([
    { tempC: -20, expectedPa: 103.24 },
    { tempC: -5, expectedPa: 401.74 },
    { tempC: 5, expectedPa: 872.6 },
    { tempC: 25, expectedPa: 3169.7 },
    { tempC: 50, expectedPa: 12351.3 },
    { tempC: 100, expectedPa: 101418 },
  ])('is $expectedPa Pa at $tempC degC', ({ tempC, expectedPa }) => {
    expect(relativeError(psychrolib.GetSatVapPres(tempC), expectedPa)).toBeLessThan(300e-6)
    expect(relativeError(saturationPa(tempC), expectedPa)).toBeLessThan(300e-6)
  })

  // Source: triple point of water, IAPWS, from memory. Tolerance: the last digit.
  it('is 611.657 Pa at the triple point', () => {
    expect(absoluteError(psychrolib.GetSatVapPres(0.01), 611.657)).toBeLessThan(5e-4)
  })
})

// Source: ASHRAE 2017 ch. 1, Table 2, as quoted in psychrolib's own tests. Tolerances: the ideal-gas form has no enhancement factor.
describe('saturated humidity ratio against ASHRAE 2017 ch. 1, Table 2', () => {
  it.each([
    { tempC: 5, expected: 0.005425, tolerance: 0.005 },
    { tempC: 25, expected: 0.020173, tolerance: 0.005 },
    { tempC: 50, expected: 0.086863, tolerance: 0.01 },
  ])('is $expected kg/kg at $tempC degC', ({ tempC, expected, tolerance }) => {
    expect(relativeError(psychrolib.GetSatHumRatio(tempC, 101_325), expected)).toBeLessThan(tolerance)
    expect(relativeError(humidityRatio(saturationPa(tempC), 101_325), expected)).toBeLessThan(tolerance)
  })
})

describe("values printed in psychrolib's own tests and header", () => {
  // Made with a spreadsheet. Tolerance 0.03 %, and 0.001 K on the way back.
  it('has a humidity ratio of 0.0192281274 at 30 degC, wet bulb 25 degC, 95461 Pa, and back', () => {
    const ratio = psychrolib.GetHumRatioFromTWetBulb(30, 25, 95_461)
    expect(relativeError(ratio, 0.0192281274)).toBeLessThan(3e-4)
    expect(absoluteError(psychrolib.GetTWetBulbFromHumRatio(30, ratio, 95_461), 25)).toBeLessThan(0.001)
  })

  // Tolerance 0.002 K.
  it('has a dew point of 21.309 degC at 25 degC and 80 %', () => {
    expect(absoluteError(dewPointC({ airTempC: 25, relHumidityPct: 80 }), 21.309)).toBeLessThan(0.002)
  })

  // Tolerance 1e-6 relative: nine printed digits.
  it('has a density of 1.08411986 kg/m3 and a volume of 0.94085537 m3/kg at 30 degC, 0.02 kg/kg, 95461 Pa', () => {
    const density = (1.02 * 95_461) / (287.042 * 303.15 * (1 + 1.607858 * 0.02))
    expect(relativeError(psychrolib.GetMoistAirDensity(30, 0.02, 95_461), 1.08411986)).toBeLessThan(1e-6)
    expect(relativeError(psychrolib.GetMoistAirVolume(30, 0.02, 95_461), 0.94085537)).toBeLessThan(1e-6)
    expect(relativeError(density, 1.08411986)).toBeLessThan(1e-6)
  })
})

// Source: ASHRAE 2017 ch. 1, Table 1, as quoted in psychrolib's own tests. Tolerance 1 Pa.
describe('stationPressurePa against ASHRAE 2017 ch. 1, Table 1', () => {
  it.each([
    { altitudeM: 500, expectedPa: 95_461 },
    { altitudeM: 1000, expectedPa: 89_875 },
    { altitudeM: 4000, expectedPa: 61_640 },
  ])('is $expectedPa Pa at $altitudeM m', ({ altitudeM, expectedPa }) => {
    expect(absoluteError(stationPressurePa(altitudeM), expectedPa)).toBeLessThan(1)
    expect(absoluteError(101_325 * (1 - 2.25577e-5 * altitudeM) ** 5.2559, expectedPa)).toBeLessThan(1)
  })
})

describe('the wet bulb of Stull 2011', () => {
  // Source: Stull 2011, worked value, from memory. Tolerance 0.01 K.
  it('is 13.70 degC at 20 degC and 50 %', () => {
    expect(absoluteError(stullWetBulbC(20, 50), 13.7)).toBeLessThan(0.01)
  })

  // Recomputed from the formula; a calculator on the web that prints 21.92 is wrong. Tolerance 0.01 K.
  it('is 22.30 degC at 30 degC and 50 %', () => {
    expect(absoluteError(stullWetBulbC(30, 50), 22.3)).toBeLessThan(0.01)
  })
})

// Air of a shell room, recomputed with psychrolib and with the equations above; no outside source. Tolerances: wet bulb 0.005 K,
// dew point 0.002 K, humidity ratio and vapour pressure to the last printed digit or 1e-5, density to its last digit, Stull 0.01 K.
const SHELL_ROOMS = [
  { t: 10, rh: 90, z: 0, pa: 101325, wet: 9.157, dew: 8.437, w: 0.006859, vapor: 1105.2, deficit: 122.8, rho: 1.2415, stull: 8.92 },
  { t: 12, rh: 60, z: 0, pa: 101325, wet: 8.218, dew: 4.484, w: 0.005209, vapor: 841.55, deficit: 561.04, rho: 1.234, stull: 7.82 },
  { t: 15, rh: 50, z: 0, pa: 101325, wet: 9.672, dew: 4.672, w: 0.005279, vapor: 852.72, deficit: 852.72, rho: 1.2211, stull: 9.4 },
  { t: 18, rh: 75, z: 0, pa: 101325, wet: 15.223, dew: 13.507, w: 0.009651, vapor: 1548.22, deficit: 516.07, rho: 1.2054, stull: 15.01 },
  { t: 20, rh: 50, z: 0, pa: 101325, wet: 13.783, dew: 9.272, w: 0.007262, vapor: 1169.4, deficit: 1169.4, rho: 1.1989, stull: 13.7 },
  { t: 22, rh: 55, z: 0, pa: 101325, wet: 16.159, dew: 12.553, w: 0.009059, vapor: 1454.61, deficit: 1190.14, rho: 1.1895, stull: 16.12 },
  { t: 25, rh: 25, z: 0, pa: 101325, wet: 13.483, dew: 3.625, w: 0.004902, vapor: 792.3, deficit: 2376.91, rho: 1.1805, stull: 13.59 },
  { t: 28, rh: 85, z: 0, pa: 101325, wet: 25.932, dew: 25.24, w: 0.02038, vapor: 3214.88, deficit: 567.33, rho: 1.1581, stull: 25.93 },
  { t: 32, rh: 95, z: 0, pa: 101325, wet: 31.277, dew: 31.096, w: 0.029044, vapor: 4520.61, deficit: 237.93, rho: 1.1373, stull: 31.35 },
  { t: 20, rh: 50, z: 1600, pa: 83523.5, wet: 13.316, dew: 9.272, w: 0.008831, vapor: 1169.4, deficit: 1169.4, rho: 0.9873, stull: 13.7 },
  { t: 22, rh: 30, z: 1600, pa: 83523.5, wet: 11.508, dew: 3.645, w: 0.005965, vapor: 793.43, deficit: 1851.33, rho: 0.9823, stull: 12.33 },
  { t: 32, rh: 25, z: 1600, pa: 83523.5, wet: 17.323, dew: 9.527, w: 0.008986, vapor: 1189.63, deficit: 3568.9, rho: 0.9484, stull: 18.64 },
]

describe.each(SHELL_ROOMS)('air of $t degC and $rh % at $z m', ({ t, rh, z, pa, wet, dew, w, vapor, deficit, rho, stull }) => {
  const air = { airTempC: t, relHumidityPct: rh }
  const pressurePa = stationPressurePa(z)

  it('has the station pressure', () => {
    expect(absoluteError(pressurePa, pa)).toBeLessThan(0.05)
  })

  it('has the wet bulb, by psychrolib and by hand', () => {
    expect(absoluteError(wetBulbC(air, pressurePa), wet)).toBeLessThan(0.005)
    expect(absoluteError(wetBulbByHand(t, rh, pressurePa), wet)).toBeLessThan(0.005)
    expect(absoluteError(wetBulbByHand(t, rh, pressurePa), wetBulbC(air, pressurePa))).toBeLessThan(0.001)
  })

  it('has the dew point, by psychrolib and by hand', () => {
    expect(absoluteError(dewPointC(air), dew)).toBeLessThan(0.002)
    expect(absoluteError(dewPointByHand(t, rh), dew)).toBeLessThan(0.002)
  })

  it('has the humidity ratio', () => {
    const lastDigit = 0.5e-6
    expect(absoluteError(psychrolib.GetHumRatioFromRelHum(t, rh / 100, pressurePa), w)).toBeLessThan(lastDigit + 1e-5 * w)
    expect(absoluteError(humidityRatio((rh / 100) * saturationPa(t), pressurePa), w)).toBeLessThan(lastDigit + 1e-5 * w)
  })

  it('has the vapour pressure and its deficit', () => {
    expect(relativeError(psychrolib.GetVapPresFromRelHum(t, rh / 100), vapor)).toBeLessThan(1e-5)
    expect(relativeError((rh / 100) * saturationPa(t), vapor)).toBeLessThan(1e-5)
    expect(absoluteError(vaporPressureDeficitPa(air), deficit)).toBeLessThan(0.006)
  })

  it('has the density', () => {
    const ratio = psychrolib.GetHumRatioFromRelHum(t, rh / 100, pressurePa)
    expect(absoluteError(psychrolib.GetMoistAirDensity(t, ratio, pressurePa), rho)).toBeLessThan(6e-5)
  })

  it('has the wet bulb of Stull, within 0.83 K of the exact one at sea level and 1.67 K at 1600 m', () => {
    expect(absoluteError(stullWetBulbC(t, rh), stull)).toBeLessThan(0.01)
    expect(absoluteError(stullWetBulbC(t, rh), wetBulbC(air, pressurePa))).toBeLessThan(z === 0 ? 0.83 : 1.67)
  })
})
