import { z } from 'zod'
import type { FanHours, PlaceAir } from '@/lib/drying/types'
import { formText } from '@/lib/format/form-text'
import { AIR_METERS, type AirMeasured } from '@/lib/room/place-air'
import { typedNumber } from '@/lib/format/typed-number'
import { endClock, formatMinute, startClock } from '@/lib/schedule/clock-text'

const airSpeed = typedNumber('Air speed').pipe(z.number().min(0, 'Air speed is not under 0 m/s.').max(20, 'Air speed is at most 20 m/s.'))

/** Typed as a percentage, kept as a share. */
const fanDuty = typedNumber('The share')
  .pipe(z.number().min(0, 'A share is 0 to 100 %.').max(100, 'A share is 0 to 100 %.'))
  .transform((pct) => pct / 100)

const blankAsNull = z.literal('').transform(() => null)

const fanSpan = z
  .strictObject({ weekday: z.int().min(1).max(7), on: startClock, off: endClock })
  .refine(({ on, off }) => on < off, { path: ['off'], message: 'Fans go off after they go on.' })

/** Seven days of four stretches. */
const MOST_SPANS = 28

/** Fields of a place as typed: where trees hang, how fast the air is there and how that is known, when its fans run, and which sensor reads its air. */
const placeFields = z.strictObject({
  name: z.string().trim().min(1, 'Name the place.').max(40, 'A name has at most 40 letters.'),
  sensorId: z.coerce.number('Choose a sensor.').int('Choose a sensor.').min(1, 'Choose a sensor.'),
  airSpeedFansOnMps: airSpeed,
  airSpeedFansOffMps: airSpeed,
  fanDuty,
  airMeasuredOn: z.union([blankAsNull, z.iso.date('Give a day, or leave it empty for an estimate.')]),
  airMeasuredWith: z.union([blankAsNull, z.enum(AIR_METERS)], 'Choose a meter.'),
  airMeasuredBy: z.union([blankAsNull, z.string().trim().min(1).max(80, 'A name has at most 80 letters.')]),
  fans: z
    .array(fanSpan)
    .max(MOST_SPANS, 'A timetable has at most 28 stretches.')
    .superRefine((spans, context) => {
      spans.forEach((span, index) => {
        const isDoubled = spans.some(
          (other, at) => at < index && other.weekday === span.weekday && other.on < span.off && span.on < other.off,
        )
        if (isDoubled) context.addIssue({ code: 'custom', path: [index, 'on'], message: 'It overlaps another stretch of this day.' })
      })
    })
    .transform((spans): FanHours[] => spans.map(({ weekday, on, off }) => ({ weekday, onMinute: on, offMinute: off }))),
})

const isMeasuredByHalf = ({ airMeasuredOn, airMeasuredWith, airMeasuredBy }: AirMeasured) =>
  airMeasuredOn === null && (airMeasuredWith !== null || airMeasuredBy !== null)
const NO_DAY = { path: ['airMeasuredOn'], message: 'Give the day on which it was measured, or leave meter and name empty too.' }

export const placeInput = placeFields.refine((place) => !isMeasuredByHalf(place), NO_DAY)
export type PlaceInput = z.infer<typeof placeInput>

/**
 * From when on a change of a place's air counts. 'now': the fans were turned, a sensor was moved; what has dried so far stands.
 * 'always': the figures were wrong; what hangs there is worked out again, back to the change before.
 */
const AIR_SINCE = ['now', 'always'] as const
const airSince = z.enum(AIR_SINCE, 'Say whether it was so before.')
export type AirSince = z.infer<typeof airSince>

/** A known place as typed, and since when its air is so. */
export const placeChange = placeFields.extend({ since: airSince }).refine((place) => !isMeasuredByHalf(place), NO_DAY)

/** A place's form as it stands in the fields. */
export type PlaceFormValues = {
  name: string
  sensorId: string
  airSpeedFansOnMps: string
  airSpeedFansOffMps: string
  /** Percent. */
  fanDuty: string
  airMeasuredOn: string
  airMeasuredWith: string
  airMeasuredBy: string
  fans: { weekday: number; on: string; off: string }[]
}

/** A known place as its form shows it. */
export function placeFormValues(place: PlaceAir & AirMeasured & { name: string; sensorId: number }): PlaceFormValues {
  return {
    name: place.name,
    sensorId: String(place.sensorId),
    airSpeedFansOnMps: String(place.airSpeedFansOnMps),
    airSpeedFansOffMps: String(place.airSpeedFansOffMps),
    // Without the crumbs of a binary fraction.
    fanDuty: String(Number((place.fanDuty * 100).toFixed(6))),
    airMeasuredOn: place.airMeasuredOn ?? '',
    airMeasuredWith: place.airMeasuredWith ?? '',
    airMeasuredBy: place.airMeasuredBy ?? '',
    fans: place.fanHours.map(({ weekday, onMinute, offMinute }) => ({
      weekday,
      on: formatMinute(onMinute),
      off: formatMinute(offMinute),
    })),
  }
}

/** Form fields of a place. Stretches come as `fans.0.weekday`, `fans.0.on`, `fans.0.off`, and so on, from 0 without a gap. */
export function readPlaceForm(form: FormData): PlaceFormValues {
  const fans: PlaceFormValues['fans'] = []
  for (let index = 0; index <= MOST_SPANS && form.has(`fans.${index}.weekday`); index += 1) {
    fans.push({
      weekday: Number(formText(form, `fans.${index}.weekday`)),
      on: formText(form, `fans.${index}.on`),
      off: formText(form, `fans.${index}.off`),
    })
  }
  return {
    name: formText(form, 'name'),
    sensorId: formText(form, 'sensorId'),
    airSpeedFansOnMps: formText(form, 'airSpeedFansOnMps'),
    airSpeedFansOffMps: formText(form, 'airSpeedFansOffMps'),
    fanDuty: formText(form, 'fanDuty'),
    airMeasuredOn: formText(form, 'airMeasuredOn'),
    airMeasuredWith: formText(form, 'airMeasuredWith'),
    airMeasuredBy: formText(form, 'airMeasuredBy'),
    fans,
  }
}
