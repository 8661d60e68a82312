import { wetBulbC } from '@/lib/drying/air'
import type { Air } from '@/lib/drying/types'

/** Wet-bulb depression of the reference room, 21 degC, 50 % RH, 101325 Pa, K. Computed from ASHRAE 2017 ch. 1, eq. 33. */
const REFERENCE_DEPRESSION_K = 6.3954

/** Heat of evaporation at the reference room's wet bulb, 14.6046 degC, kJ/kg. */
const REFERENCE_HEAT_OF_EVAPORATION_KJ_KG = 2466.52

/**
 * Heat needed to evaporate water, kJ/kg, 0 to 40 degC.
 *
 * @source straight line through the steam-table values; IAPWS values from memory: 2500.9 at 0 degC, 2406.0 at 40 degC.
 */
export function heatOfEvaporationKjKg(tempC: number): number {
  return 2501 - 2.361 * tempC
}

/**
 * How far a wet coat cools below the room, K: air temperature less wet bulb.
 *
 * @throws {RangeError} outside -10 to 60 degC, 0 to 105 % RH, 50 to 110 kPa.
 * @source ASHRAE Handbook - Fundamentals (SI) 2017, ch. 1, eq. 33.
 */
export function wetBulbDepressionK(air: Air, pressurePa: number): number {
  return Math.max(0, air.airTempC - wetBulbC(air, pressurePa))
}

/**
 * Room factor B: how fast water leaves a wet coat in this room, compared with the reference room of 21 degC, 50 % RH at
 * sea level. Reference hours per hour in air of 1.0 m/s; 0 in saturated air.
 *
 *   B = (T - T*) / 6.3954 K  x  2466.52 kJ/kg / heat of evaporation at T*
 *
 * The heat that reaches the coat is proportional to T - T*; the water it drives off is that heat over the heat of evaporation.
 *
 * @throws {RangeError} outside -10 to 60 degC, 0 to 105 % RH, 50 to 110 kPa.
 * @source heat balance of a wet surface, e.g. Geankoplis, Transport Processes and Unit Operations, sec. 9.6; the reference room is ours.
 * @example roomFactor({ airTempC: 24, relHumidityPct: 40 }, 101325) // 1.34
 */
export function roomFactor(air: Air, pressurePa: number): number {
  const depressionK = wetBulbDepressionK(air, pressurePa)
  const heat = heatOfEvaporationKjKg(air.airTempC - depressionK)
  return (depressionK / REFERENCE_DEPRESSION_K) * (REFERENCE_HEAT_OF_EVAPORATION_KJ_KG / heat)
}
