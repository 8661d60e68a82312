import { TZDate } from '@date-fns/tz'
import { z } from 'zod'
import { typedNumber } from '@/lib/format/typed-number'
import { readTyped } from '@/lib/format/typed-units'
import { fromSi, UNIT_SIGNS, wholeNumber, type TempUnit } from '@/lib/format/units'
import { AIR_TEMP_LIMITS_C } from '@/lib/room/air-limits'
import { relHumidityPct } from '@/lib/room/reading-contract'

/**
 * An instant from the wall clock of a zone, as a form's field of day and time gives it: '2026-10-13T15:10'. In the hour that a clock
 * change takes away it is the same time by the clock before.
 */
export function localInstant(text: string, timeZone: string): number | null {
  const [, year, month, day, hour, minute] = /^(\d{4})-(\d{2})-(\d{2})T(\d{2}):(\d{2})(?::\d{2})?$/.exec(text) ?? []
  if (year === undefined) return null
  const at = new TZDate(Number(year), Number(month) - 1, Number(day), Number(hour), Number(minute), 0, 0, timeZone).getTime()
  return Number.isNaN(at) ? null : at
}

/** The form of a typed reading: temperature in the unit of whoever types it, the time by the foundry's clock; no time is now. */
export const readingForm = (unit: TempUnit, timeZone: string) =>
  z.object({
    operationId: z.uuid(),
    sensorId: z.coerce.number('Choose what was read.').pipe(z.int('Choose what was read.').min(1, 'Choose what was read.')),
    airTempC: typedNumber('Temperature').pipe(
      z
        .number('Temperature is a number.')
        .refine((typed) => typed >= fromSi(AIR_TEMP_LIMITS_C.least, unit) && typed <= fromSi(AIR_TEMP_LIMITS_C.most, unit), {
          error: `A shell room is between ${wholeNumber(fromSi(AIR_TEMP_LIMITS_C.least, unit))} and ${wholeNumber(fromSi(AIR_TEMP_LIMITS_C.most, unit))} ${UNIT_SIGNS[unit]}.`,
        })
        .transform((typed) => readTyped(typed, unit)),
    ),
    relHumidityPct: typedNumber('Humidity').pipe(relHumidityPct),
    measuredAt: z.string().transform((text, context) => {
      if (text.trim() === '') return undefined
      const at = localInstant(text.trim(), timeZone)
      if (at === null) context.addIssue('Give day and time, or leave it empty for now.')
      return at ?? undefined
    }),
  })
