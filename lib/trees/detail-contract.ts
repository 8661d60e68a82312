import type {
  CoatingWay,
  CoatKind,
  EvidenceKind,
  RecessClass,
  Spacing,
  Spot,
  Stucco,
  Verdict,
  WeighingMoment,
} from '@/lib/coats/vocabulary'
import type { QueueTree } from '@/lib/queue/contract'
import type { CupKind, WaxSurface } from '@/lib/trees/tree-input'
import type { Why } from '@/lib/trees/why'

/** One piece of evidence as it was kept; a withdrawn one stays in sight. */
export type CoatEvidence = {
  id: string
  kind: EvidenceKind
  spot: Spot | null
  verdict: Verdict | null
  moment: WeighingMoment | null
  massKg: number | null
  surfaceTempC: number | null
  airTempC: number | null
  at: number
  by: string
  memberId: string
  loggedAt: number
  /** By the clock at that moment, without it. */
  moistureRatio: number | null
  withdrawnAt: number | null
  withdrawnBy: string | null
  withdrawnReason: string | null
}

/** One line of the coat log: a coat that is on, or one still to come. */
export type CoatRow = {
  number: number
  kind: CoatKind
  stucco: Stucco
  bathName: string
  isNewest: boolean
  /** Null for a planned coat. */
  on: {
    coatId: string
    way: CoatingWay
    dippedAt: number
    roughMinutes: number
    by: string
    placeName: string
    drainSeconds: number
    airTempC: number | null
    relHumidityPct: number | null
    meanRelHumidityPct: number | null
    worstRelHumidityPct: number | null
    /** Until the next coat, the release, or now. */
    dryingMs: number
    /** Share of the coat's water left when it was dipped over, or now. */
    moistureRatio: number | null
    isCovered: boolean
    /** Forecast as it stood at the dip. */
    forecast: { p10At: number | null; p50At: number | null; p90At: number | null }
    deviations: string[]
    reason: string | null
    evidence: CoatEvidence[]
  } | null
  /** Played forward for a coat to come; null where it cannot be foreseen. */
  planned: { likelyAt: number | null; safeAt: number | null } | null
}

/** Water left in the newest coat over time, percent, with its P10-P90 band; `isForecast` from now on. */
export type CurvePoint = { at: number; likelyPct: number; lowPct: number; highPct: number; isForecast: boolean }

export type TreeDetail = {
  tree: QueueTree
  recipe: { id: string; versionId: string; name: string; version: number; isCalibrated: boolean }
  waxMassKg: number
  cupKind: CupKind
  cupVolumeL: number
  recessClass: RecessClass
  spacing: Spacing
  hungMassKg: number | null
  createdAt: number
  createdBy: string | null
  pieces: { id: string; workId: string; workTitle: string; sectionName: string; editionNumber: number; isRecast: boolean }[]
  intake: {
    waxSurface: WaxSurface | null
    isWaxAtRoomTemp: boolean
    isCupFirm: boolean
    areVentsAndCorePinsIn: boolean
    passedAt: number | null
    passedBy: string | null
  }
  /** Newest and coats to come first, as on the page. */
  coats: CoatRow[]
  /** Why the newest coat's time stands where it does; null where nothing has moved it. */
  why: Why | null
  curve: { points: CurvePoint[]; targetPct: number; likelyAt: number | null; safeAt: number | null } | null
  /** Bounded: at most some 300 points over the newest coat's drying. */
  climate: { at: number; airTempC: number; relHumidityPct: number }[]
  holds: {
    id: string
    reason: string
    by: string
    at: number
    liftedBy: string | null
    liftedAt: number | null
    liftReason: string | null
  }[]
  lookOvers: { id: string; note: string; by: string; at: number; coatNumber: number }[]
  release: { by: string; at: number; confirmedBy: string | null } | null
  history: { id: number; at: number; by: string | null; text: string }[]
  isWatched: boolean
  /** The newest coat's taking back, for this viewer: 'own' within ten minutes, 'with reason' for a supervisor, else null. */
  takeBack: { coatId: string; kind: 'own' | 'with reason'; until: number | null } | null
}

/** What stands between a tree and its release; the supervisor sees every line, ticked or not. */
export type ReleaseCheck = { code: 'coats' | 'dry' | 'look-over' | 'hold' | 'confirmation'; isMet: boolean; text: string }
