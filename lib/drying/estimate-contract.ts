import { millisecondsInDay } from 'date-fns/constants'
import { z } from 'zod'
import { RECESS_CLASSES, SPACINGS, STUCCOS } from '@/lib/coats/vocabulary'
import { DEFAULT_SIGMA } from '@/lib/drying/need'
import { DEFAULT_MOISTURE_TARGET } from '@/lib/drying/recipe-defaults'
import { airTempC, instant, relHumidityPct } from '@/lib/room/reading-contract'

const air = { airTempC, relHumidityPct }

/** A coat hung longer adds nothing that anybody can use. */
export const LONGEST_DAYS = 60

const airSpeedMps = z.number('Air speed is a number in m/s.').min(0, 'Air speed is 0 m/s or more.').max(20, 'Air speed is 20 m/s at most.')

const reading = z.strictObject({ at: instant, ...air, source: z.enum(['sensor', 'typed']).default('sensor') })

/** Either one air for the whole time, or readings of it, in any order. */
const climate = z
  .strictObject({
    constant: z.strictObject(air).optional(),
    readings: z.array(reading).min(1, 'Give at least one reading.').max(10_000, 'At most 10,000 readings.').optional(),
  })
  .refine((value) => (value.constant === undefined) !== (value.readings === undefined), 'Give either a constant air or readings.')

const need = z.strictObject({
  /** Reference hours of the recipe's coat to its moisture target, its own stucco included. */
  referenceHours: z.number().min(0.01).max(1000),
  recipeStucco: z.enum(STUCCOS).default('medium'),
  /** The recipe's own unless told. */
  usedStucco: z.enum(STUCCOS).optional(),
  spacing: z.enum(SPACINGS).default('open'),
  recessClass: z.enum(RECESS_CLASSES).default('none'),
  /** Of the coat below at the moment of this dip. */
  moistureRatioBelow: z.number().min(0).max(1).default(0),
  /** The tree's own factor, ln scale. */
  theta: z.number().min(-2).max(2).default(0),
  moistureTarget: z.number().min(0.001).max(0.999).default(DEFAULT_MOISTURE_TARGET),
  /** Spread of ln(need) before a recess or typed readings widen it. */
  baseSigma: z.number().min(0).max(1).default(DEFAULT_SIGMA),
})

/**
 * Body of `POST /api/v1/drying/estimate`. Instants are ISO 8601 with a zone or epoch milliseconds; everything else is SI with
 * its unit in the name. Strict: a field that is not known is an error, never passed over.
 */
export const estimateInput = z
  .strictObject({
    climate,
    airSpeedMps: airSpeedMps.optional(),
    /** In the order of time, the first one from the dip or before. */
    airSpeeds: z
      .array(z.strictObject({ from: instant, airSpeedMps }))
      .min(1)
      .max(200)
      .optional(),
    altitudeM: z.number().min(-400).max(5000).optional(),
    pressurePa: z.number().min(50_000, 'Pressure is in pascals: 50,000 or more.').max(110_000).optional(),
    need,
    /** Chill, swing and heat are harder on the first two coats. */
    coatNumber: z.int().min(1).max(60).default(3),
    /** Of this room at the dip, for the swing; from the readings unless told. */
    airTempAtDipC: airTempC.optional(),
    airTempAtCoat1C: airTempC.optional(),
    dippedAt: instant,
    /** The clock starts at the stucco: dip plus drain. */
    drainSeconds: z.int().min(0).max(3600).default(0),
    /** Last moment that counts: the newest reading or instant asked for unless told; with a constant air a fortnight after the dip. */
    until: instant.optional(),
    /** Moments at which dose and moisture ratio are wanted; `until` where none is named. */
    at: z.array(instant).max(1000, 'At most 1,000 instants.').default([]),
  })
  .superRefine((value, context) => {
    const complain = (path: (string | number)[], message: string) => context.addIssue({ code: 'custom', path, message })
    if ((value.airSpeedMps === undefined) === (value.airSpeeds === undefined)) {
      complain(['airSpeedMps'], 'Give one air speed, or stretches of it as airSpeeds.')
    }
    if ((value.altitudeM === undefined) === (value.pressurePa === undefined)) {
      complain(['altitudeM'], 'Give either altitudeM or pressurePa.')
    }
    for (const [index, stretch] of (value.airSpeeds ?? []).entries()) {
      const before = value.airSpeeds?.[index - 1]
      if (before === undefined && stretch.from > value.dippedAt) {
        complain(['airSpeeds', index, 'from'], 'The first stretch begins at the dip or before.')
      }
      if (before !== undefined && stretch.from <= before.from) {
        complain(['airSpeeds', index, 'from'], 'Stretches come in the order of time.')
      }
    }
    const seen = new Map<number, { airTempC: number; relHumidityPct: number; source: string }>()
    for (const [index, row] of (value.climate.readings ?? []).entries()) {
      const known = seen.get(row.at)
      if (known === undefined) seen.set(row.at, row)
      else if (known.airTempC !== row.airTempC || known.relHumidityPct !== row.relHumidityPct || known.source !== row.source) {
        complain(['climate', 'readings', index, 'at'], 'Another reading has this time and says something else.')
      }
    }
    const end = value.until
    if (end !== undefined && end < value.dippedAt) complain(['until'], 'until lies before the dip.')
    const longest = value.dippedAt + LONGEST_DAYS * millisecondsInDay
    if (end !== undefined && end > longest) complain(['until'], `until lies at most ${LONGEST_DAYS} days after the dip.`)
    const lastAt = end ?? longest
    const tooLate = end === undefined ? `An instant lies at most ${LONGEST_DAYS} days after the dip.` : 'This lies after until.'
    for (const [index, at] of value.at.entries()) {
      if (at > lastAt) complain(['at', index], tooLate)
    }
  })
export type EstimateInput = z.output<typeof estimateInput>

const triple = z.object({ likely: z.number(), low: z.number(), high: z.number() })

const airNow = z.object({
  ...air,
  /** Air less wet bulb, K. */
  wetBulbGapK: z.number(),
  dewPointC: z.number(),
  vaporPressureDeficitPa: z.number(),
})

/** What may be wrong with the air, with the number that says so and the limit it crossed. */
const estimateFlag = z.discriminatedUnion('code', [
  z.object({ code: z.literal('damp'), at: z.enum(['likely', 'safe']), relHumidityPct: z.number(), limitPct: z.number() }),
  z.object({ code: z.literal('chill'), level: z.enum(['warn', 'stop']), wetBulbGapK: z.number(), limitK: z.number() }),
  z.object({ code: z.literal('too fast'), speed: z.number(), limit: z.number() }),
  z.object({ code: z.literal('swing'), deviationK: z.number(), limitK: z.number(), since: z.int() }),
  z.object({ code: z.literal('heat'), measure: z.enum(['room', 'above coat 1']), value: z.number(), limit: z.number() }),
  z.object({ code: z.literal('gap'), minutes: z.number() }),
  z.object({ code: z.literal('stale'), minutes: z.number(), limitMinutes: z.number() }),
])
export type EstimateFlag = z.infer<typeof estimateFlag>

/** Answer. Instants are epoch milliseconds; doses and needs are reference hours; speeds are shares of the reference speed. */
export const estimateAnswer = z.object({
  /** P50, P10 (`low`) and P90 (`high`) of the need that was used, and the spread of its logarithm. */
  need: z.object({ ...triple.shape, sigma: z.number() }),
  /** From when on readings are credited: the clock's start, or the first reading where none held then. */
  creditedFrom: z.int(),
  until: z.int(),
  points: z.array(
    z.object({
      at: z.int(),
      dose: triple,
      /** Share of the coat's water left, with its P10-P90 band. */
      moistureRatio: triple,
      /** Null where nothing is known of the air at that moment. */
      roomFactor: z.number().nullable(),
      placeFactor: z.number(),
      speed: z.number().nullable(),
    }),
  ),
  /** P10, P50 and P90 of the time at which the coat is dry; null where it lies after `until`. */
  dry: z.object({ earliestAt: z.int().nullable(), likelyAt: z.int().nullable(), safeAt: z.int().nullable() }),
  /** No usable reading, or the newest one too old, and not dry: never to be shown as dry. */
  isUnknown: z.boolean(),
  /** One typed reading stands behind it: likely at the most. */
  needsConfirmation: z.boolean(),
  /** The air at the clock's start; null where no reading tells. */
  air: airNow.nullable(),
  flags: z.array(estimateFlag),
})
export type EstimateAnswer = z.infer<typeof estimateAnswer>
