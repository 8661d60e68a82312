import { z } from 'zod'
import { HIGHEST_ALTITUDE_M, LOWEST_ALTITUDE_M } from '@/lib/drying/air'
import { formText } from '@/lib/format/form-text'
import { typedNumber } from '@/lib/format/typed-number'
import { fromSi, LENGTH_UNITS, MASS_UNITS, TEMP_UNITS, toSi, UNIT_SIGNS, type TempUnit } from '@/lib/format/units'
import { isTimeZone } from '@/lib/foundry/time-zones'

/** Bounds of the room that a recipe can be made for, °C. Common practice, no source. */
const LOWEST_BAND_C = 0
const HIGHEST_BAND_C = 45

/** Hundredths: enough that 70.3 °F comes back as 70.3 °F. */
const round = (value: number) => Math.round(value * 100) / 100 + 0

const bandTemp = (unit: TempUnit) => {
  const bounds = `between ${round(fromSi(LOWEST_BAND_C, unit))} and ${round(fromSi(HIGHEST_BAND_C, unit))} ${UNIT_SIGNS[unit]}`
  return typedNumber('Temperature')
    .transform((typed) => round(toSi(typed, unit)))
    .pipe(z.number().min(LOWEST_BAND_C, `A shell room is ${bounds}.`).max(HIGHEST_BAND_C, `A shell room is ${bounds}.`))
}

const bandRh = typedNumber('Humidity').pipe(
  z.number().min(0, 'Humidity is between 0 and 100 %.').max(100, 'Humidity is between 0 and 100 %.'),
)

/**
 * The foundry's settings as typed. Temperatures of the band come in the unit in which the form showed them and leave in °C.
 *
 * @param shown the unit of the form's temperatures.
 */
export const foundryInput = (shown: TempUnit) =>
  z
    .strictObject({
      name: z.string().trim().min(1, 'Name the foundry.').max(80, 'A name has at most 80 letters.'),
      timeZone: z.string().refine(isTimeZone, 'Choose a time zone from the list, such as Europe/London.'),
      altitudeM: typedNumber('Altitude').pipe(
        z
          .number()
          .min(LOWEST_ALTITUDE_M, `Altitude is between ${LOWEST_ALTITUDE_M} and ${HIGHEST_ALTITUDE_M} m.`.replace('-', '−'))
          .max(HIGHEST_ALTITUDE_M, `Altitude is between ${LOWEST_ALTITUDE_M} and ${HIGHEST_ALTITUDE_M} m.`.replace('-', '−')),
      ),
      tempUnit: z.enum(TEMP_UNITS, 'Choose a unit.'),
      massUnit: z.enum(MASS_UNITS, 'Choose a unit.'),
      lengthUnit: z.enum(LENGTH_UNITS, 'Choose a unit.'),
      bandLowTempC: bandTemp(shown),
      bandHighTempC: bandTemp(shown),
      bandLowRhPct: bandRh,
      bandHighRhPct: bandRh,
    })
    .refine((input) => input.bandLowTempC < input.bandHighTempC, {
      path: ['bandHighTempC'],
      message: 'The highest temperature is above the lowest.',
    })
    .refine((input) => input.bandLowRhPct < input.bandHighRhPct, {
      path: ['bandHighRhPct'],
      message: 'The highest humidity is above the lowest.',
    })
export type FoundryInput = z.infer<ReturnType<typeof foundryInput>>

/** The foundry's form as it stands in the fields; temperatures in the shown unit. */
export type FoundryFormValues = Record<keyof FoundryInput, string>

/** The stored settings as the form shows them. */
export function foundryFormValues(foundry: FoundryInput, shown: TempUnit): FoundryFormValues {
  return {
    name: foundry.name,
    timeZone: foundry.timeZone,
    altitudeM: String(foundry.altitudeM),
    tempUnit: foundry.tempUnit,
    massUnit: foundry.massUnit,
    lengthUnit: foundry.lengthUnit,
    bandLowTempC: String(round(fromSi(foundry.bandLowTempC, shown))),
    bandHighTempC: String(round(fromSi(foundry.bandHighTempC, shown))),
    bandLowRhPct: String(foundry.bandLowRhPct),
    bandHighRhPct: String(foundry.bandHighRhPct),
  }
}

/** Form fields of the settings, and the unit in which the form showed its temperatures. */
export function readFoundryForm(form: FormData): { shown: TempUnit; values: FoundryFormValues } {
  const values = {
    name: formText(form, 'name'),
    timeZone: formText(form, 'timeZone'),
    altitudeM: formText(form, 'altitudeM'),
    tempUnit: formText(form, 'tempUnit'),
    massUnit: formText(form, 'massUnit'),
    lengthUnit: formText(form, 'lengthUnit'),
    bandLowTempC: formText(form, 'bandLowTempC'),
    bandHighTempC: formText(form, 'bandHighTempC'),
    bandLowRhPct: formText(form, 'bandLowRhPct'),
    bandHighRhPct: formText(form, 'bandHighRhPct'),
  }
  return { shown: formText(form, 'shownTempUnit') === 'degF' ? 'degF' : 'degC', values }
}
