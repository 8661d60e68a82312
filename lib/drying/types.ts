import type { CoatKind, Guard, RecessClass, Spacing, Stucco } from '@/lib/coats/vocabulary'

/** Instants are epoch milliseconds (UTC) everywhere in lib/drying; durations say their unit in the name. */
export type Instant = number

export type Air = { airTempC: number; relHumidityPct: number }

/** 'typed': a person read the wall hygrometer; it holds until the next reading, 12 h at most. */
export type ReadingSource = 'sensor' | 'typed'

/** One accepted reading with its room factor B (reference hours per hour in 1.0 m/s air). */
export type RoomReading = Air & { measuredAt: Instant; roomFactor: number; source: ReadingSource }

/** A drying rate that runs linearly from the start of a stretch to its end, reference hours per hour. */
export type Rate = { start: number; end: number }

export type SegmentKind =
  | 'measured' // between two sensor readings at most 60 min apart
  | 'typed' // rests on a typed reading that still holds, or runs towards one
  | 'gap' // more than 60 min without a reading: credited low, bounded both ways
  | 'hour' // a whole hour from the hourly table
  | 'held' // at most 30 min after the newest sensor reading
  | 'forecast'

/** A stretch of one room's drying at a place factor of 1. Low and high differ from likely only in gaps (and hours that hold one). */
export type RoomSegment = { from: Instant; to: Instant; kind: SegmentKind; likely: Rate; low: Rate; high: Rate }

/** One whole UTC hour of one room: a row of the hourly table. Dose in reference hours at a place factor of 1. */
export type DoseHour = {
  /** A whole multiple of 3,600,000. */
  hourStart: Instant
  dose: Dose
  /** Minutes of the hour that are credited at all, gaps included. 60 when the hour has no hole. */
  coveredMinutes: number
  /** Minutes of the hour that lie in a gap: credited low, bounded both ways. */
  gapMinutes: number
  /** Whether a typed reading stands behind any part of the hour. */
  hasTyped: boolean
}

/** Segments in order of time, not overlapping; a hole between two of them credits nothing. */
export type RoomCurve = readonly RoomSegment[]

/** Part of a tree's stay: one room curve, one place factor. `to` may be Infinity. Spans are in order and do not overlap. */
export type DryingSpan = { from: Instant; to: Instant; placeFactor: number; curve: RoomCurve }

/** Dose in reference hours. `low` serves the safe time, `high` the earliest one. */
export type Dose = { likely: number; low: number; high: number }

/** One local weekday's hours with the fans on. Minutes after local midnight; weekday 1 is Monday, 7 Sunday. */
export type FanHours = { weekday: number; onMinute: number; offMinute: number }

export type PlaceAir = {
  airSpeedFansOnMps: number
  airSpeedFansOffMps: number
  /** Share of the time 'on' in which the fans blow on the trees, 0 to 1; 1 unless they swing or cycle. */
  fanDuty: number
  /** How much faster water leaves here than the speed says, by finished coats; 1 where it is left out. */
  airFactor?: number
  fanHours: readonly FanHours[]
}

/** What a person can say of a place's fans; 'timetable' takes back what was said before. */
export const FAN_STATES = ['on', 'off', 'timetable'] as const
export type FanState = (typeof FAN_STATES)[number]

/** What a person said of a place's fans, and when. */
export type FanSwitch = { at: Instant; state: FanState }

/** A stretch of time in which a person's word on the fans stands in place of the timetable. `to` may be Infinity. */
export type FanOverride = { from: Instant; to: Instant; isOn: boolean }

export type NeedInput = {
  /** Reference hours of the recipe's coat to its target, its own stucco included. */
  recipeReferenceHours: number
  recipeStucco: Stucco
  usedStucco: Stucco
  spacing: Spacing
  recessClass: RecessClass
  /** Moisture ratio of the coat below at the moment of this dip; 0 where it was dry or there is none. */
  moistureRatioBelow: number
  /** The tree's own factor, ln scale; 0 until evidence moves it. */
  treeTheta: number
  /** How much slower each class of recess dries, where finished coats have said so; else the starting values. */
  recessFactors?: Readonly<Record<RecessClass, number>>
}

export type CoatForClock = {
  number: number
  kind: CoatKind
  /** Dip time plus drain: the moment of the stucco. */
  clockStartsAt: Instant
  /** Half width of a rough 'about 20 min ago', minutes; 0 when the time is sharp. */
  roughMinutes: number
  needReferenceHours: number
  moistureTarget: number
  guard: Guard
  recessClass: RecessClass
  /** Air temperature at the dip, where it is known. */
  airTempAtDipC: number | null
  /** Spread of ln(need) before recess and typed readings are added; 0.25 (DEFAULT_SIGMA) until evidence narrows it. */
  baseSigma?: number
  /** What damp air adds to the spread; 0 where it is not said. */
  airSigma?: number
  /** Page's exponent where weighings of this coat tell it. */
  pageExponent?: number
}

/** A reading's time and source, without its air. */
export type ReadingMark = { measuredAt: Instant; source: ReadingSource }

/**
 * The readings behind a coat's dose, from its clock's start to now, of the sensors of the places where it hung in their turn.
 * Build it with `windowReadings`, or by three small queries.
 */
export type WindowReadings = {
  sensorCount: number
  typedCount: number
  /** Newest reading at or before the clock's start, of the place where the coat hung then. */
  lastBeforeStart: ReadingMark | null
  /** Oldest reading after the clock's start. */
  firstInWindowAt: Instant | null
  /** Newest reading of the place where the tree hangs now, in the window or before it. */
  newest: ReadingMark | null
}

/** What the clock says of the newest coat of a tree. */
export type CoatCall = {
  /** From when on the readings are credited: the clock's start, or the first reading where nothing held at the start. */
  creditedFrom: Instant
  dose: Dose
  need: Dose
  /** 1 just dipped, moistureTarget at the need. */
  moistureRatio: number
  /** P10, P50 and P90 instants at which the coat is dry; null beyond the horizon of the curve. At most now only where readings say so. */
  earliestAt: Instant | null
  likelyAt: Instant | null
  /** Null too once it has passed on one typed reading alone (needsConfirmation). */
  safeAt: Instant | null
  /** The time named by the guard, when it lies in the past and rests on readings; else null. */
  guardReachedAt: Instant | null
  isLikelyDry: boolean
  isSafeDry: boolean
  /** Not dry and no usable reading in the window, or the newest one is too old. Never shown as dry. */
  isUnknown: boolean
  /** Only one typed reading stands behind the call: it stops at 'likely, confirm'. */
  needsConfirmation: boolean
  sigma: number
}
