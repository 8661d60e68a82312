import psychrolib from 'psychrolib'
import { assertWithin } from '@/lib/drying/guards'
import type { Air } from '@/lib/drying/types'

// The only module that calls psychrolib: one shared object with a global unit setting. Nothing may ever set it to IP;
// degrees Fahrenheit and inches of mercury are converted where they are typed in.
psychrolib.SetUnitSystem(psychrolib.SI)

/** Below this no room sensor means what it says, and the dew point has no solution at 0 %. Common practice, no source. */
const LOWEST_REL_HUMIDITY_PCT = 0.5

/**
 * Relative humidity as the formulas take it, %. Damp sensors report up to 105 %; the raw value stays with the reading.
 *
 * @throws {RangeError} outside 0 to 105 %.
 * @source common practice, no source.
 */
export function clampRelHumidityPct(relHumidityPct: number): number {
  assertWithin('Relative humidity in percent', relHumidityPct, 0, 105)
  return Math.min(100, Math.max(LOWEST_REL_HUMIDITY_PCT, relHumidityPct))
}

/** Checks one reading and gives it in the units of psychrolib: degC and a fraction. */
function checkAir({ airTempC, relHumidityPct }: Air): { airTempC: number; relHum: number } {
  assertWithin('Air temperature in degC', airTempC, -10, 60)
  return { airTempC, relHum: clampRelHumidityPct(relHumidityPct) / 100 }
}

/** Checks a pressure in pascals. A value in kPa, hPa or inHg falls far outside the range and is refused. */
export function assertPressurePa(pressurePa: number): void {
  assertWithin('Station pressure in Pa', pressurePa, 50_000, 110_000)
}

/** The shore of the Dead Sea, and higher than any town. */
export const LOWEST_ALTITUDE_M = -430
export const HIGHEST_ALTITUDE_M = 5000

/**
 * Pressure of the standard atmosphere at a foundry's altitude, Pa. A barometer is better where there is one.
 *
 * @throws {RangeError} outside -430 to 5000 m.
 * @source ASHRAE Handbook - Fundamentals (SI) 2017, ch. 1, eq. 3.
 */
export function stationPressurePa(altitudeM: number): number {
  assertWithin('Altitude in metres', altitudeM, LOWEST_ALTITUDE_M, HIGHEST_ALTITUDE_M)
  return psychrolib.GetStandardAtmPressure(altitudeM)
}

/**
 * Thermodynamic wet-bulb temperature, degC: where a freely wet coat settles. Equal to the air temperature at 100 %.
 *
 * @throws {RangeError} outside -10 to 60 degC, 0 to 105 % RH, 50 to 110 kPa.
 * @source ASHRAE Handbook - Fundamentals (SI) 2017, ch. 1, eq. 33 and 35, solved by psychrolib to 0.0005 K.
 */
export function wetBulbC(air: Air, pressurePa: number): number {
  const { airTempC, relHum } = checkAir(air)
  assertPressurePa(pressurePa)
  return psychrolib.GetTWetBulbFromRelHum(airTempC, relHum, pressurePa)
}

/**
 * Dew point, degC. Information for the room page: the clock does not use it.
 *
 * @throws {RangeError} outside -10 to 60 degC or 0 to 105 % RH.
 * @source ASHRAE Handbook - Fundamentals (SI) 2017, ch. 1, eq. 5 and 6 solved for the temperature.
 */
export function dewPointC(air: Air): number {
  const { airTempC, relHum } = checkAir(air)
  return psychrolib.GetTDewPointFromRelHum(airTempC, relHum)
}

/**
 * Vapour-pressure deficit, Pa. Information for the room page: wet coats cool themselves, so the clock uses the wet bulb.
 *
 * @throws {RangeError} outside -10 to 60 degC or 0 to 105 % RH.
 * @source ASHRAE Handbook - Fundamentals (SI) 2017, ch. 1, eq. 5 and 6.
 */
export function vaporPressureDeficitPa(air: Air): number {
  const { airTempC, relHum } = checkAir(air)
  return psychrolib.GetSatVapPres(airTempC) * (1 - relHum)
}
