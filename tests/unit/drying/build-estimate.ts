import { estimate } from '@/lib/drying/estimate'
import { estimateInput, type EstimateAnswer } from '@/lib/drying/estimate-contract'
import { hour } from './build-readings'

/** A body of the estimate door: a backup coat of need 4 dipped at START in 21 degC, 50 %, 1.0 m/s at sea level, unless told otherwise. */
export function estimateBody(overrides: Record<string, unknown> = {}): Record<string, unknown> {
  return {
    climate: { constant: { airTempC: 21, relHumidityPct: 50 } },
    airSpeedMps: 1,
    pressurePa: 101_325,
    need: { referenceHours: 4 },
    dippedAt: hour(0),
    ...overrides,
  }
}

/** Readings of a body: hours after START, degC, %. */
export const rows = (airs: readonly (readonly [hours: number, airTempC: number, relHumidityPct: number])[]) => ({
  readings: airs.map(([hours, airTempC, relHumidityPct]) => ({ at: hour(hours), airTempC, relHumidityPct })),
})

/** What the door answers, its body checked as the door does. */
export const estimateOf = (overrides: Record<string, unknown> = {}): EstimateAnswer =>
  estimate(estimateInput.parse(estimateBody(overrides)))
