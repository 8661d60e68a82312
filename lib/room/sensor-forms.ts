import { z } from 'zod'
import { typedNumber } from '@/lib/format/typed-number'
import type { TempUnit } from '@/lib/format/units'
import { localInstant } from '@/lib/room/reading-form'

/** More than this is no offset: the sensor is broken. Our own limits. */
const LARGEST_OFFSET_K = 10
const LARGEST_OFFSET_PCT = 30

const K_IN = { degC: 1, degF: 1.8 } as const

/** An instant by the foundry's clock; empty is now. */
const since = (timeZone: string) =>
  z.string().transform((text, context) => {
    if (text.trim() === '') return undefined
    const at = localInstant(text.trim(), timeZone)
    if (at === null) context.addIssue('Give day and time, or leave it empty for now.')
    return at ?? undefined
  })

const note = z.string().trim().max(200, 'A note has at most 200 letters.')

/** What is added to a sensor's readings: the temperature as a difference in the unit of whoever types it. */
export const offsetForm = (unit: TempUnit, timeZone: string) =>
  z.object({
    since: since(timeZone),
    airTempOffsetK: typedNumber('The difference')
      .transform((typed) => Math.round((typed / K_IN[unit]) * 1e4) / 1e4)
      .refine((kelvin) => Math.abs(kelvin) <= LARGEST_OFFSET_K, {
        error: `A sensor that is off by more than ${LARGEST_OFFSET_K * K_IN[unit]} degrees is broken: replace the device.`,
      }),
    relHumidityOffsetPct: typedNumber('The difference').refine((points) => Math.abs(points) <= LARGEST_OFFSET_PCT, {
      error: `A sensor that is off by more than ${LARGEST_OFFSET_PCT} points is broken: replace the device.`,
    }),
    note,
  })
export type OffsetInput = z.infer<ReturnType<typeof offsetForm>>

/** Another device under the same name. */
export const deviceForm = (timeZone: string) =>
  z.object({
    since: since(timeZone),
    serial: z.string().trim().max(60, 'A serial number has at most 60 letters.'),
    note,
  })
export type DeviceInput = z.infer<ReturnType<typeof deviceForm>>
