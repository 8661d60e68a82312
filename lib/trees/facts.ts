import type {
  CoatingWay,
  CoatKind,
  EvidenceKind,
  Guard,
  RecessClass,
  Spacing,
  Spot,
  Stucco,
  Verdict,
  WeighingMoment,
} from '@/lib/coats/vocabulary'
import type { PlaceAir } from '@/lib/drying/types'

/** A coat as the recipe asks for it. */
export type RecipeCoatFacts = {
  number: number
  kind: CoatKind
  bathId: string
  bathName: string
  stucco: Stucco
  needReferenceHours: number
  moistureTarget: number
  guard: Guard
  drainSeconds: number
  longestWaitHours: number
  isPrewet: boolean
  readAloud: string
  /** Spread of ln(need): 0.25 for starting values, less once finished coats stand behind it. */
  needSpread: number
  isCalibrated: boolean
}

/** What somebody weighed, felt or saw on a coat; withdrawn rows are left out. */
export type EvidenceFacts = {
  id: string
  kind: EvidenceKind
  /** Null for a weighing. */
  spot: Spot | null
  verdict: Verdict | null
  moment: WeighingMoment | null
  massKg: number | null
  surfaceTempC: number | null
  airTempC: number | null
  relHumidityPct: number | null
  takenAt: number
  by: string
  memberId: string
  /** Dose of the coat at that moment, once the coat is covered; until then it follows the readings. */
  doseReferenceHours: number | null
}

/** A person's newest word on how dry a coat is. */
export type Word = { verdict: Verdict; kind: 'touch' | 'colour'; spot: Spot; by: string; at: number }

/** A coat that is on, not withdrawn. */
export type CoatFacts = {
  id: string
  number: number
  kind: CoatKind
  stucco: Stucco
  way: CoatingWay
  placeId: string
  dippedAt: number
  drainSeconds: number
  roughMinutes: number
  /** As they were at the dip: a tree that moves to a newer version of its recipe takes its coats along as they are. */
  needReferenceHours: number
  moistureTarget: number
  guard: Guard
  longestWaitHours: number
  needSpread: number
  isCalibrated: boolean
  /** How much slower the slowest spot was taken to dry than the outside. */
  recessFactor: number
  airTempC: number | null
  coveredAt: number | null
  moistureRatioAtRedip: number | null
  /** In order of `takenAt`. */
  evidence: readonly EvidenceFacts[]
}

/** What is stored of a tree; every state and time is derived from it. */
export type TreeFacts = {
  id: string
  tag: string
  title: string
  /** Demo data in a foundry that is not the demo itself: it is marked wherever it shows. */
  isDemo: boolean
  recessClass: RecessClass
  spacing: Spacing
  pourDate: string | null
  intakePassedAt: number | null
  releasedAt: number | null
  scrappedAt: number | null
  recipe: { versionId: string; name: string; version: number; coats: readonly RecipeCoatFacts[] }
  /** In order of number. */
  coats: readonly CoatFacts[]
  /** Where it hung and from when, in order; the last one is where it hangs. */
  stays: readonly { placeId: string; since: number }[]
  hold: { id: string; reason: string; by: string; at: number } | null
  /** Weighings before coat 1. */
  waxWeighings: readonly EvidenceFacts[]
  /** The newest word on the newest coat, of the spot that dries last: 'dry' lets a person dip. */
  word: Word | null
  /** Newest look-over of the newest coat that was made when the shell was dried out; earlier ones do not count. */
  lookedOverAt: number | null
}

/** How the air at a place was until it was changed. */
export type FormerAir = PlaceAir & { until: number; sensorId: number }

export type PlaceFacts = PlaceAir & {
  id: string
  name: string
  sensorId: number
  isTypedOnly: boolean
  isRetired: boolean
  /** In order of `until`; before the first change there is none. */
  formerAirs: readonly FormerAir[]
}

/** The moment of the stucco: from then on the coat dries. */
export const clockStart = (coat: { dippedAt: number; drainSeconds: number }): number => coat.dippedAt + coat.drainSeconds * 1000
