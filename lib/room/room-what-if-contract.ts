import { z } from 'zod'
import { GUARDS } from '@/lib/coats/vocabulary'
import { airTempC, relHumidityPct } from '@/lib/room/reading-contract'

const airSpeedMps = z.number('Air speed is a number in m/s.').min(0, 'Air speed is 0 m/s or more.').max(20, 'Air speed is 20 m/s at most.')

const HORIZONS = ['closing', 'opening'] as const

/**
 * Body of `POST /api/v1/rooms/{sensorId}/what-if`: an air from now on. What is left out stays as it is forecast, or as the fans'
 * timetable has it.
 */
export const roomWhatIf = z
  .strictObject({
    until: z.enum(HORIZONS).default('opening').describe('How long that air holds: until the doors close, or until they open next.'),
    airTempC: airTempC.optional(),
    relHumidityPct: relHumidityPct.optional(),
    airSpeedMps: airSpeedMps.optional().describe('At every tree of the room, m/s.'),
    fansOnAt: z.array(z.uuid()).max(100).optional().describe('Places whose fans stay on.'),
  })
  .refine((value) => value.airSpeedMps === undefined || value.fansOnAt === undefined, {
    path: ['fansOnAt'],
    message: 'Give one air speed, or the places whose fans stay on.',
  })
export type RoomWhatIf = z.output<typeof roomWhatIf>

const pair = z.object({ likelyAt: z.int().nullable(), safeAt: z.int().nullable() })

/** By when the next act on a tree may come: before the doors close, before they open next, later, or not in sight. */
const SLOTS = ['closing', 'opening', 'later', 'not in sight'] as const
export type Slot = (typeof SLOTS)[number]

const from = z.int()

/** What an air would do to the wax, from when on, and by how much. */
const harm = z.discriminatedUnion('code', [
  z.object({ code: z.literal('chill'), from, level: z.enum(['warn', 'stop']), wetBulbGapK: z.number(), limitK: z.number() }),
  z.object({ code: z.literal('too fast'), from, speed: z.number(), limit: z.number() }),
  z.object({ code: z.literal('swing'), from, deviationK: z.number(), limitK: z.number() }),
  z.object({ code: z.literal('heat'), from, measure: z.enum(['room', 'above coat 1']), value: z.number(), limit: z.number() }),
  z.object({ code: z.literal('too dry'), from, relHumidityPct: z.number(), limitPct: z.number() }),
])
export type Harm = z.infer<typeof harm>

/** The same harm to several trees, the worst of it. */
const sharedHarm = z.object({ harm, tags: z.array(z.string()) })
export type SharedHarm = z.infer<typeof sharedHarm>

const count = z.object({ before: z.int(), after: z.int() })

/** Answer. Instants are epoch milliseconds; `before` is as things stand, `after` in the air that was asked about. */
export const roomWhatIfAnswer = z.object({
  now: z.int(),
  /** When that air ends. */
  until: z.int(),
  /** When the doors close; null while they are closed, or where the foundry keeps no hours. */
  closesAt: z.int().nullable(),
  opensAt: z.int(),
  /** Trees whose next act may come before these moments. */
  beforeClosing: count.nullable(),
  beforeOpening: count,
  /** How much sooner all trees together have the time that their next act waits for; negative where later. */
  soonerMs: z.int(),
  /** Empty where every shell of the room, dry ones too, stays within the limits of chill, swing and heat. */
  harms: z.array(sharedHarm),
  trees: z.array(
    z.object({
      treeId: z.string(),
      tag: z.string(),
      title: z.string(),
      placeName: z.string(),
      coatNumber: z.int(),
      /** Which of the two times lets the next act happen. */
      guard: z.enum(GUARDS),
      isUncalibrated: z.boolean(),
      /** Null where nothing is known of the tree's air. */
      before: pair.nullable(),
      after: pair.nullable(),
      readyBefore: z.enum(SLOTS),
      readyAfter: z.enum(SLOTS),
      harms: z.array(z.enum(['chill', 'too fast', 'swing', 'heat', 'too dry'])),
    }),
  ),
})
export type RoomWhatIfAnswer = z.infer<typeof roomWhatIfAnswer>
export type WhatIfTree = RoomWhatIfAnswer['trees'][number]
