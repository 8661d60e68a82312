import type { CoatingWay, CoatKind, Guard, RecessClass, Spacing, Stucco } from '@/lib/coats/vocabulary'
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
}

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
  airTempC: number | null
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
  recipe: { versionId: string; name: string; version: number; isCalibrated: boolean; coats: readonly RecipeCoatFacts[] }
  /** In order of number. */
  coats: readonly CoatFacts[]
  /** Where it hung and from when, in order; the last one is where it hangs. */
  stays: readonly { placeId: string; since: number }[]
  hold: { id: string; reason: string; by: string; at: number } | null
  /** Newest look at the newest coat. */
  look: { verdict: 'looks dry' | 'not yet'; by: string; at: number } | null
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
