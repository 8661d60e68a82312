import type { EstimateAnswer, EstimateFlag } from '@/lib/drying/estimate-contract'
import { formatDuration } from '@/lib/format/duration'
import { formatKelvin, formatTemperature, fromSi, toSi, wholeNumber, type TempUnit } from '@/lib/format/units'

/** What a person may turn in the what-if. Temperature in degC; need in reference hours. */
export type WhatIf = { airTempC: number; relHumidityPct: number; airSpeedMps: number; referenceHours: number; isFaceCoat: boolean }

/** How far each dial goes and by what steps, in the unit that it shows. */
export type Dial = { min: number; max: number; step: number }

/** The temperature dial in somebody's own unit: whole half degrees C, or whole degrees F. */
export const tempDial = (unit: TempUnit): Dial => (unit === 'degF' ? { min: 50, max: 95, step: 1 } : { min: 10, max: 35, step: 0.5 })
export const HUMIDITY_DIAL: Dial = { min: 20, max: 95, step: 1 }
export const AIR_DIAL: Dial = { min: 0, max: 3, step: 0.1 }
export const NEED_DIAL: Dial = { min: 0.5, max: 24, step: 0.5 }

/** A value on the nearest step of a dial, inside its ends. */
export function onDial(value: number, { min, max, step }: Dial): number {
  const steps = Math.round((Math.min(max, Math.max(min, value)) - min) / step)
  return Number((min + steps * step).toFixed(2))
}

/** The next step up or down; it stays at the end. */
export const stepped = (value: number, dial: Dial, direction: 1 | -1): number => onDial(value + direction * dial.step, dial)

/** A temperature as its dial shows it. */
export const shownTemp = (airTempC: number, unit: TempUnit): number => onDial(fromSi(airTempC, unit), tempDial(unit))

/** A temperature from its dial. */
export const dialledTemp = (shown: number, unit: TempUnit): number => Math.round(toSi(shown, unit) * 1000) / 1000

export type WhatIfRoom = {
  pressurePa: number
  /** The room as it is, against which a face coat's swing is measured; null where it is not known. */
  airTempNowC: number | null
  coolestCoat1C: number | null
}

/** The body that asks the estimate door: a coat dipped now that hangs in one steady air. */
export function whatIfBody(choice: WhatIf, room: WhatIfRoom, now: number): Record<string, unknown> {
  const { airTempC, relHumidityPct, airSpeedMps, referenceHours, isFaceCoat } = choice
  return {
    climate: { constant: { airTempC, relHumidityPct } },
    airSpeedMps,
    pressurePa: room.pressurePa,
    need: { referenceHours },
    coatNumber: isFaceCoat ? 1 : 3,
    dippedAt: now,
    at: [now],
    ...(room.airTempNowC === null ? {} : { airTempAtDipC: room.airTempNowC }),
    ...(room.coolestCoat1C === null ? {} : { airTempAtCoat1C: room.coolestCoat1C }),
  }
}

/** How long such a coat takes, as a pair: 'likely 2 h 35 min, safe 3 h 33 min'. */
export function whatIfPair({ dry }: EstimateAnswer, dippedAt: number): { likely: string; safe: string } {
  const words = (at: number | null) => (at === null ? 'over a fortnight' : formatDuration(at - dippedAt))
  return { likely: words(dry.likelyAt), safe: words(dry.safeAt) }
}

/** A flag of an estimate as a sentence with the remedy. */
export function flagWords(flag: EstimateFlag, unit: TempUnit): string {
  switch (flag.code) {
    case 'chill':
      return `${flag.level === 'stop' ? 'Do not dry a coat in this' : 'Chill'}: the wet bulb lies ${formatKelvin(flag.wetBulbGapK, unit)} under the room, limit ${formatKelvin(flag.limitK, unit)}. The wax shrinks under the coat. More humidity.`
    case 'too fast':
      return `Too fast: ${wholeNumber(flag.speed * 100)} % of recipe speed, limit ${wholeNumber(flag.limit * 100)} %. A face coat cracks or lifts. Less air, or more humidity.`
    case 'swing':
      return `Swing: ${formatKelvin(Math.abs(flag.deviationK), unit)} ${flag.deviationK > 0 ? 'above' : 'below'} the room as it is, limit ${formatKelvin(flag.limitK, unit)}. Wax moves under a wet face coat and lifts it.`
    case 'heat':
      return flag.measure === 'room'
        ? `Heat: ${formatTemperature(flag.value, unit)}, limit ${formatTemperature(flag.limit, unit)}. Wax grows and cracks the shell.`
        : `Heat: ${formatKelvin(flag.value, unit)} above the room at coat 1, limit ${formatKelvin(flag.limit, unit)}. Wax grows and cracks the shell.`
    case 'damp':
      return `Damp: ${wholeNumber(flag.relHumidityPct)} % RH when the clock says ${flag.at}, limit ${wholeNumber(flag.limitPct)} %. Confirm by touch, weight or temperature.`
    case 'gap':
      return `Readings are missing for ${formatDuration(flag.minutes * 60_000)}: credited low.`
    case 'stale':
      return `The newest reading is ${formatDuration(flag.minutes * 60_000)} old.`
  }
}
