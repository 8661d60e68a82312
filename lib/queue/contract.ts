import { z } from 'zod'
import { COAT_KINDS, GUARDS, SPOTS, STUCCOS, VERDICTS } from '@/lib/coats/vocabulary'
import { placeFans } from '@/lib/room/fans-contract'
import { TREE_STATES } from '@/lib/trees/states'

/** Instants travel as epoch milliseconds (UTC); the browser shows them in the foundry's zone. */
const instant = z.int().describe('Epoch milliseconds, UTC.')

/** A pair of promised times. Null where the time lies beyond the forecast's horizon. */
const pair = z.object({ earliestAt: instant.nullable(), likelyAt: instant.nullable(), safeAt: instant.nullable() })

const coatInSection = z.object({ kind: z.enum(COAT_KINDS), stucco: z.enum(STUCCOS) })

/** Things a person should know before a dip, or about a tree as it hangs. Each carries its own sentence, made on the server. */
export const warning = z.object({
  code: z.enum([
    'still wet',
    'held',
    'intake open',
    'unknown',
    'confirm first',
    'damp room',
    'chill',
    'swing',
    'heat',
    'too dry for face',
    'overdue',
    'said not yet',
    'said dry',
    'pour at risk',
    'damp in store',
  ]),
  level: z.enum(['note', 'warn', 'stop']),
  text: z.string(),
  /** The same sentence with its temperatures in °F; only where it has any. All tablets share one queue. */
  textInDegF: z.string().optional(),
})
export type Warning = z.infer<typeof warning>

export const queueTree = z.object({
  id: z.uuid(),
  tag: z.string(),
  /** What hangs on the tree in one line: 'Otter Gate, panel 2', or 'Kelp Bowl, 2 pieces'. */
  title: z.string(),
  /** Demo data in a foundry that is not the demo itself: it is marked wherever it shows. */
  isDemo: z.boolean(),
  place: z.object({ id: z.uuid(), name: z.string() }),
  state: z.enum(TREE_STATES),
  /** Short words after the state's own: 'Waiting 35 min' counts from here; 'Overdue 1 h 05 min' too; null where there is no since. */
  stateSince: instant.nullable(),
  coatsOn: z.int(),
  newestCoat: z.object({ id: z.uuid(), number: z.int(), dippedAt: instant }).nullable(),
  coats: z.array(coatInSection),
  /** Share of the newest coat's water that is gone, 0 to 1; null where no coat is drying. */
  openDry: z.number().nullable(),
  /** Share of water gone at which the newest coat may be dipped over, 0.90 or 0.95. */
  openTarget: z.number(),
  moistureRatio: z.number().nullable(),
  /** The coat to dip next; null when every coat is on or the tree has left the floor. */
  next: z
    .object({
      number: z.int(),
      kind: z.enum(COAT_KINDS),
      bathId: z.uuid(),
      bathName: z.string(),
      stucco: z.enum(STUCCOS),
      drainSeconds: z.int(),
      isPrewet: z.boolean(),
      readAloud: z.string(),
    })
    .nullable(),
  guard: z.enum(GUARDS).nullable(),
  /** When the newest coat is dry enough for the next act: from readings so far, then the forecast. */
  dry: pair.nullable(),
  /** When the whole shell is dried out, played forward coat by coat; null when it is already, or not foreseeable. */
  driedOut: pair.nullable(),
  /** True while the recipe's coat still runs on starting values nobody has calibrated. */
  isUncalibrated: z.boolean(),
  /** The same of the coats behind `driedOut`. */
  isPlanUncalibrated: z.boolean(),
  pourDate: z.iso.date().nullable(),
  willMissPour: z.boolean(),
  hold: z.object({ id: z.uuid(), reason: z.string(), by: z.string(), at: instant }).nullable(),
  /** Newest word of a person on the newest coat: 'Looks dry' or 'Not yet'. */
  word: z
    .object({ verdict: z.enum(VERDICTS), kind: z.enum(['touch', 'colour']), spot: z.enum(SPOTS), by: z.string(), at: instant })
    .nullable(),
  /** Where on this shell something can be taken, the spot that dries last at the end. */
  spots: z.array(z.enum(SPOTS)),
  warnings: z.array(warning),
})
export type QueueTree = z.infer<typeof queueTree>

const DRYING_PULLS = ['slow', 'good', 'too dry for face coats', 'not known'] as const

export const queueRoom = z.object({
  sensorId: z.int(),
  sensorName: z.string(),
  airTempC: z.number().nullable(),
  relHumidityPct: z.number().nullable(),
  /** Gap between air and wet bulb, K. */
  wetBulbGapK: z.number().nullable(),
  /** Drying speed of the air in percent of the reference hour's air (21 °C, 50 % RH). */
  speedPct: z.number().nullable(),
  pull: z.enum(DRYING_PULLS),
  measuredAt: instant.nullable(),
  source: z.enum(['sensor', 'typed']).nullable(),
  /** No reading for 30 min (typed: 12 h): the trees of this room are 'unknown'. */
  isStale: z.boolean(),
  isTypedOnly: z.boolean(),
})
export type QueueRoom = z.infer<typeof queueRoom>

export const queueBath = z.object({
  id: z.uuid(),
  name: z.string(),
  kind: z.enum(['face', 'backup']),
  stirredAt: instant.nullable(),
  stirredBy: z.string().nullable(),
  /** False until somebody says 'stirred' on this local day. */
  isStirredToday: z.boolean(),
})
export type QueueBath = z.infer<typeof queueBath>

export const queue = z.object({
  now: instant,
  foundry: z.object({ name: z.string(), timeZone: z.string(), isDemo: z.boolean(), hasDemoData: z.boolean(), isDemoFeedOn: z.boolean() }),
  /** This shift's end and the next shift's two ends; the tide axis lies on them. Closed days are skipped. */
  shift: z.object({ isOpen: z.boolean(), endsAt: instant, nextStartsAt: instant, nextEndsAt: instant }),
  rooms: z.array(queueRoom),
  baths: z.array(queueBath),
  places: z.array(
    z.object({
      id: z.uuid(),
      name: z.string(),
      sensorId: z.int(),
      needsTypedReading: z.boolean(),
      /** Null where the air is the same with and without fans. */
      fans: placeFans.nullable(),
    }),
  ),
  worker: z.object({ pulseAt: instant.nullable(), isAlive: z.boolean() }),
  trees: z.array(queueTree),
})
export type Queue = z.infer<typeof queue>
