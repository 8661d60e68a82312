import { assertPressurePa } from '@/lib/drying/air'
import { assertWithin } from '@/lib/drying/guards'
import type { PlaceAir } from '@/lib/drying/types'

const STANDARD_PRESSURE_PA = 101_325

/**
 * Place factor phi: how fast water leaves where the tree hangs, compared with air of 1.0 m/s at sea level.
 *
 *   phi = 0.30 + 0.70 sqrt( max(v, 0.1 m/s) / 1.0 m/s  x  P / 101325 Pa )
 *
 * 0.30 is the share of radiation from walls and lamps; the root follows Nu ~ Re^0.5; pressure stands for the density of the air.
 *
 * @throws {RangeError} outside 0 to 20 m/s or 50 to 110 kPa.
 * @source exponent: Churchill and Bernstein 1977 for slow air; the shares 0.30 and 0.70 are our own starting values, to be calibrated.
 * @example placeFactor(0.5, 101325) // 0.795
 */
export function placeFactor(airSpeedMps: number, pressurePa: number): number {
  assertWithin('Air speed in m/s', airSpeedMps, 0, 20)
  assertPressurePa(pressurePa)
  return 0.3 + 0.7 * Math.sqrt(Math.max(airSpeedMps, 0.1) * (pressurePa / STANDARD_PRESSURE_PA))
}

/**
 * Place factors of a place with its fans on and off. Fans that swing or cycle blow on the trees for a share of the time only, and since
 * the factor bends with the speed, it is the factor that is averaged:
 *
 *   on = duty x phi(v on) + (1 - duty) x phi(v off)
 *
 * What finished coats say of the place comes on top: both times its air factor.
 *
 * @throws {RangeError} as placeFactor, and for a duty outside 0 to 1 or an air factor outside 0.3 to 3.
 * @source our own model.
 * @example fanFactors({ airSpeedFansOnMps: 2, airSpeedFansOffMps: 0.1, fanDuty: 0.3, fanHours: [] }, 101325).on // 0.752
 */
export function fanFactors(air: PlaceAir, pressurePa: number): { on: number; off: number } {
  assertWithin('Duty of the fans', air.fanDuty, 0, 1)
  const airFactor = air.airFactor ?? 1
  assertWithin('Air factor', airFactor, 0.3, 3)
  const blown = placeFactor(air.airSpeedFansOnMps, pressurePa)
  const off = placeFactor(air.airSpeedFansOffMps, pressurePa)
  const on = air.fanDuty === 1 ? blown : air.fanDuty * blown + (1 - air.fanDuty) * off
  return { on: airFactor * on, off: airFactor * off }
}
